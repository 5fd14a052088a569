using System.Globalization;
using Evenhand.Monitoring.Charters.Yaml;

namespace Evenhand.Monitoring.Charters;

/// <summary>Reads lengths of time such as <c>10m</c>.</summary>
internal static class DurationValue
{
    private const int MostYears = 100;
    private const string Units = "s, m, h, d, w or y";

    /// <summary>A positive length of at most a hundred years, or null.</summary>
    public static CharterDuration? Read(KeyedNode? node, string example)
    {
        string mend = $"write a whole number and one of {Units}, such as {example}";
        string? text = node?.Text(mend);
        if (text is null)
        {
            return null;
        }

        if (text.Length < 2 || UnitOf(text[^1]) is not { } unit || !text.AsSpan(0, text.Length - 1).ContainsOnlyDigits())
        {
            node!.Report($"{QuotedText.Of(text)} is no length of time", mend);
            return null;
        }

        bool fits = long.TryParse(text.AsSpan(0, text.Length - 1), NumberStyles.None, CultureInfo.InvariantCulture, out long count)
            && count <= TimeSpan.FromDays(365 * MostYears).Ticks / unit.Ticks;
        if (!fits || count == 0)
        {
            node!.Report(fits ? $"{text} is no time at all" : $"{QuotedText.Of(text)} is longer than {MostYears} years", mend);
            return null;
        }

        return new CharterDuration(text, unit * count);
    }

    private static TimeSpan? UnitOf(char unit) => unit switch
    {
        's' => TimeSpan.FromSeconds(1),
        'm' => TimeSpan.FromMinutes(1),
        'h' => TimeSpan.FromHours(1),
        'd' => TimeSpan.FromDays(1),
        'w' => TimeSpan.FromDays(7),
        'y' => TimeSpan.FromDays(365),
        _ => null,
    };

    private static bool ContainsOnlyDigits(this ReadOnlySpan<char> text) => text.IndexOfAnyExceptInRange('0', '9') < 0;
}
