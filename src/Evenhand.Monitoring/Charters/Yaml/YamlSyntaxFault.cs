using YamlDotNet.Core;

namespace Evenhand.Monitoring.Charters.Yaml;

/// <summary>Puts the scanner's complaints into words that say how to mend them.</summary>
internal static class YamlSyntaxFault
{
    private static readonly (string Part, string Mend)[] Mends =
    [
        ("invalid mapping", "indent the keys of one mapping alike, and quote a text that holds \": \""),
        ("end of stream", "close the quotation mark or bracket that opens here"),
        ("',' or", "separate the entries with commas and close the bracket"),
        ("cannot start any token", "quote a text that begins with this character"),
        ("unknown escape", "write \\\\ for a backslash, or use single quotation marks"),
        ("'-' indicator", "indent the list's entries alike, each beginning with -"),
        ("expected key", "write key: value, indented like its neighbours"),
    ];

    /// <summary>The fault of an exception of the scanner or parser.</summary>
    public static YamlFault Describe(YamlException broken, string text)
    {
        string message = Shorten(broken.Message);
        if (message.Contains("tab", StringComparison.Ordinal) && FindTab(text) is { } tab)
        {
            return new(tab.Line, tab.Column, "is not valid YAML: a tab in the indentation", "indent with spaces");
        }

        string mend = Array.Find(Mends, m => message.Contains(m.Part, StringComparison.Ordinal)).Mend
            ?? "mend the notation at this place";
        return new(Position(broken.Start.Line), Position(broken.Start.Column), $"is not valid YAML: {message}", mend);
    }

    /// <summary>A fault of which only the place is known.</summary>
    public static YamlFault At(int line, int column) =>
        new(line, column, "is not valid YAML from here on", "close every bracket and quotation mark, and indent with spaces");

    private static int Position(long value) => (int)Math.Clamp(value, 1, int.MaxValue);

    // "While scanning a mapping, found invalid tab as indentation." becomes "found invalid tab as indentation".
    private static string Shorten(string message)
    {
        int comma = message.IndexOf(", ", StringComparison.Ordinal);
        string rest = message.StartsWith("While ", StringComparison.Ordinal) && comma > 0 ? message[(comma + 2)..] : message;
        return QuotedText.OneLine(rest.TrimEnd('.'));
    }

    private static (int Line, int Column)? FindTab(string text)
    {
        int line = 0;
        foreach (ReadOnlySpan<char> row in text.AsSpan().EnumerateLines())
        {
            line++;
            int tab = row.IndexOf('\t');
            if (tab >= 0 && row[..tab].Trim(' ').IsEmpty)
            {
                return (line, tab + 1);
            }
        }

        return null;
    }
}
