namespace Evenhand.Monitoring.Charters;

/// <summary>Reads the windows.</summary>
internal static class WindowReader
{
    private const string Mend = "write a list of lengths such as [1h, 24h, 30d]";

    private static readonly IReadOnlyList<CharterDuration> Default =
    [
        new("1h", TimeSpan.FromHours(1)), new("24h", TimeSpan.FromHours(24)), new("30d", TimeSpan.FromDays(30)),
    ];

    /// <summary>The windows; where none are given, the default if there is a time.</summary>
    public static IReadOnlyList<CharterDuration> Read(KeyedNode? node, bool hasTime)
    {
        if (node is null)
        {
            return hasTime ? Default : [];
        }

        var windows = new List<CharterDuration>();
        IReadOnlyList<KeyedNode> items = node.List(Mend) ?? [];
        foreach (KeyedNode item in items)
        {
            if (DurationValue.Read(item, "24h") is { } window && IsUsable(item, window, windows))
            {
                windows.Add(window);
            }
        }

        if (items.Count > CharterLimits.Windows)
        {
            node.Report(
                FormattableString.Invariant($"has {items.Count} windows"),
                FormattableString.Invariant($"keep at most {CharterLimits.Windows}"));
        }

        return windows;
    }

    private static bool IsUsable(KeyedNode item, CharterDuration window, List<CharterDuration> earlier)
    {
        if (window.Length.Ticks % TimeSpan.TicksPerMinute != 0)
        {
            item.Report($"{window} is no whole number of minutes", "write a length such as 1h");
            return false;
        }

        int same = earlier.FindIndex(w => w.Length == window.Length);
        if (same >= 0)
        {
            item.Report($"{window} is as long as {earlier[same]}, which is listed already", "remove one of the two");
            return false;
        }

        return true;
    }
}
