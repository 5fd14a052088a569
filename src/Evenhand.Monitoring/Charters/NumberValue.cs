using System.Globalization;
using Evenhand.Monitoring.Charters.Yaml;

namespace Evenhand.Monitoring.Charters;

/// <summary>Reads numbers, written plainly and finite.</summary>
internal static class NumberValue
{
    /// <summary>A finite number, or null.</summary>
    public static double? Read(KeyedNode? node, string mend)
    {
        string? text = node?.PlainText(mend);
        if (text is null)
        {
            return null;
        }

        if (TryParse(text, out double value))
        {
            return value;
        }

        bool infinite = text.TrimStart('+', '-') is ".inf" or ".Inf" or ".INF" or ".nan" or ".NaN" or ".NAN" || double.IsInfinity(value);
        node!.Report(infinite ? $"{QuotedText.Of(text)} is no finite number" : $"{QuotedText.Of(text)} is no number", mend);
        return null;
    }

    /// <summary>A finite number for which a test holds, or null.</summary>
    public static double? Read(KeyedNode? node, Func<double, bool> test, string range, string mend)
    {
        double? value = Read(node, mend);
        if (value is { } number && !test(number))
        {
            node!.Report($"{node.Text("")} is not {range}", mend);
            return null;
        }

        return value;
    }

    /// <summary>A whole number within bounds, or null.</summary>
    public static long? Whole(KeyedNode? node, long least, long most, string example)
    {
        string mend = most == int.MaxValue || most == long.MaxValue
            ? $"write a whole number of at least {least}, such as {example}"
            : $"write a whole number from {least} to {most}, such as {example}";
        string? text = node?.PlainText(mend);
        if (text is null)
        {
            return null;
        }

        if (!long.TryParse(text, NumberStyles.AllowLeadingSign, CultureInfo.InvariantCulture, out long value))
        {
            node!.Report($"{QuotedText.Of(text)} is no whole number", mend);
            return null;
        }

        if (value < least || value > most)
        {
            node!.Report($"{text} is {(value < least ? "too small" : "too large")}", mend);
            return null;
        }

        return value;
    }

    /// <summary>Parses a decimal number; false for anything else and for what is too large for a double.</summary>
    public static bool TryParse(string text, out double value) =>
        double.TryParse(
            text,
            NumberStyles.AllowLeadingSign | NumberStyles.AllowDecimalPoint | NumberStyles.AllowExponent,
            CultureInfo.InvariantCulture,
            out value)
        && double.IsFinite(value)
        && text.Any(char.IsAsciiDigit);
}
