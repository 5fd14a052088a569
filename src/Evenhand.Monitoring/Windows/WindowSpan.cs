using Evenhand.Monitoring.Charters;

namespace Evenhand.Monitoring.Windows;

/// <summary>A window [From, To) made of whole buckets.</summary>
/// <remarks>
/// The start falls on a minute for windows up to 6 hours, on a quarter-hour up to 7 days and on a local day beyond, rounded
/// down, so that a window is never shorter than its name. Inside, the longest buckets that fit are taken: days (long windows
/// only), then quarter-hours, then the minutes up to the end.
/// </remarks>
public sealed class WindowSpan
{
    private static readonly long MinuteLimit = 6 * EventTime.Hour;
    private static readonly long QuarterLimit = 7 * EventTime.Day;

    private readonly long _daysEnd;
    private readonly long _quartersEnd;
    private readonly bool _isAll;

    private WindowSpan(string name, long from, long to, long daysEnd, long quartersEnd, bool isAll = false)
    {
        Name = name;
        From = from;
        To = to;
        _daysEnd = daysEnd;
        _quartersEnd = quartersEnd;
        _isAll = isAll;
    }

    /// <summary>The window's name: the charter's text, or <c>all</c>.</summary>
    public string Name { get; }

    /// <summary>The start, in microseconds since 1970-01-01T00:00:00Z.</summary>
    public long From { get; }

    /// <summary>The end, exclusive.</summary>
    public long To { get; }

    /// <summary>Every record there is.</summary>
    /// <param name="oldest">The oldest event time, for the statement of coverage.</param>
    /// <param name="asOf">The as-of.</param>
    public static WindowSpan All(long oldest, long asOf) => new("all", EventTime.Floor(oldest, EventTime.Minute), asOf, 0, 0, isAll: true);

    /// <summary>The window of a length that ends at an as-of.</summary>
    /// <param name="window">The charter's window.</param>
    /// <param name="asOf">The end, exclusive; in microseconds.</param>
    /// <param name="days">The days of the charter's time zone.</param>
    public static WindowSpan Ending(CharterDuration window, long asOf, LocalDays days)
    {
        ArgumentNullException.ThrowIfNull(days);
        long length = window.Microseconds;
        if (length <= MinuteLimit)
        {
            long from = EventTime.Floor(asOf - length, EventTime.Minute);
            return new WindowSpan(window.Text, from, asOf, from, from);
        }

        long quartersEnd = EventTime.Floor(asOf, EventTime.QuarterHour);
        if (length <= QuarterLimit)
        {
            long from = EventTime.Floor(asOf - length, EventTime.QuarterHour);
            return new WindowSpan(window.Text, from, asOf, from, quartersEnd);
        }

        long start = length % EventTime.Day == 0
            ? days.StartOfDayBefore(asOf, (int)(length / EventTime.Day))
            : days.DayOf(asOf - length).Start;
        long today = days.DayOf(asOf).Start;
        return new WindowSpan(window.Text, start, asOf, today, Math.Max(today, quartersEnd));
    }

    /// <summary>The stretch just before a window: whole local days, and what is left of the day in which the window starts.</summary>
    /// <param name="window">The window.</param>
    /// <param name="length">How far to go back.</param>
    /// <param name="days">The days of the charter's time zone.</param>
    public static WindowSpan Before(WindowSpan window, CharterDuration length, LocalDays days)
    {
        ArgumentNullException.ThrowIfNull(window);
        ArgumentNullException.ThrowIfNull(days);
        return Between("baseline", window.From - length.Microseconds, window.From, days);
    }

    /// <summary>A stretch between two instants; the start is rounded down to a local day.</summary>
    public static WindowSpan Between(string name, long from, long to, LocalDays days)
    {
        ArgumentNullException.ThrowIfNull(days);
        long start = days.DayOf(from).Start;
        long lastDay = days.DayOf(to).Start;
        return new WindowSpan(name, start, to, lastDay, Math.Max(lastDay, EventTime.Floor(to, EventTime.QuarterHour)));
    }

    /// <summary>Whether a bucket is one of those that make up the window.</summary>
    /// <param name="tier">The bucket's tier.</param>
    /// <param name="start">The bucket's start.</param>
    public bool Takes(Tier tier, long start) => tier switch
    {
        Tier.All => _isAll,
        _ when _isAll => false,
        Tier.Day => start >= From && start < _daysEnd,
        Tier.QuarterHour => start >= Math.Max(From, _daysEnd) && start < _quartersEnd,
        Tier.Minute => start >= Math.Max(From, Math.Max(_daysEnd, _quartersEnd)) && start < To,
        _ => false,
    };
}
