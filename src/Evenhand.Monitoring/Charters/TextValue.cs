using Evenhand.Monitoring.Charters.Yaml;

namespace Evenhand.Monitoring.Charters;

/// <summary>Reads texts; a number or <c>true</c> written for a text is taken as it stands.</summary>
internal static class TextValue
{
    /// <summary>A text that is not blank, or null.</summary>
    public static string? Read(KeyedNode? node, string mend)
    {
        string? text = node?.Text(mend);
        if (text is not null && string.IsNullOrWhiteSpace(text))
        {
            node!.Report("is blank", mend);
            return null;
        }

        return text;
    }

    /// <summary>A name: not blank, without control characters; fields also without <c>+</c>, <c>=</c> and a bracket in front.</summary>
    public static string? Name(KeyedNode? node, bool ofField)
    {
        const string Mend = "write a name such as language";
        string? name = Read(node, Mend);
        if (name is null)
        {
            return null;
        }

        int bad = name.AsSpan().IndexOfAny('+', '=');
        if (name.Any(char.IsControl))
        {
            node!.Report($"the name {QuotedText.Of(name)} holds a control character", "remove it");
        }
        else if (ofField && bad >= 0)
        {
            node!.Report($"the name {QuotedText.Of(name)} holds {name[bad]}", "leave it out; + joins names of groups and = stands before a value");
        }
        else if (ofField && name[0] == '(')
        {
            node!.Report($"the name {QuotedText.Of(name)} begins with a bracket", "leave it out; names in brackets belong to the program");
        }
        else if (name.Trim() != name)
        {
            node!.Report($"the name {QuotedText.Of(name)} begins or ends with a space", "remove it");
        }

        return name;
    }

    /// <summary>One of a few words, or null.</summary>
    public static string? Choice(KeyedNode? node, params string[] words)
    {
        string list = words.Length == 2 ? $"{words[0]} or {words[1]}" : string.Join(", ", words[..^1]) + $" or {words[^1]}";
        string? text = node?.Text($"write {list}");
        if (text is not null && !words.Contains(text, StringComparer.Ordinal))
        {
            node!.Report($"{QuotedText.Of(text)} is not known here", $"write {list}");
            return null;
        }

        return text;
    }

    /// <summary>True or false, or null. Only the words of YAML 1.2 count: <c>no</c> and <c>yes</c> are texts.</summary>
    public static bool? Flag(KeyedNode? node)
    {
        string? text = node?.PlainText("write true or false");
        switch (text)
        {
            case null:
                return null;
            case "true" or "True" or "TRUE":
                return true;
            case "false" or "False" or "FALSE":
                return false;
            default:
                node!.Report($"is the text {QuotedText.Of(text)}", "write true or false");
                return null;
        }
    }
}
