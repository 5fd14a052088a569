using Evenhand.Monitoring.Charters;

namespace Evenhand.Monitoring.Windows;

/// <summary>How long the buckets of each tier are kept behind the newest event time.</summary>
/// <param name="keep">How long day sums are kept, from the charter.</param>
public sealed class Retention(CharterDuration keep)
{
    /// <summary>How long minutes are kept: 48 hours.</summary>
    public const long Minutes = 48 * EventTime.Hour;

    /// <summary>How long quarter-hours are kept: 35 days.</summary>
    public const long QuarterHours = 35 * EventTime.Day;

    private readonly long _days = keep.Microseconds;

    /// <summary>How far behind the newest event time every tier certainly keeps a record; the longest day has 25 hours.</summary>
    public long ByAllTiers => Math.Min(Minutes - EventTime.Hour, _days - (26 * EventTime.Hour));

    /// <summary>The earliest start of a bucket that is still kept.</summary>
    /// <param name="tier">The tier.</param>
    /// <param name="newest">The newest event time, or the as-of of a replay where it is given.</param>
    public long Earliest(Tier tier, long newest) => tier switch
    {
        Tier.Minute => EventTime.Floor(newest - Minutes, EventTime.Minute),
        Tier.QuarterHour => EventTime.Floor(newest - QuarterHours, EventTime.QuarterHour),
        Tier.Day => newest - _days,
        _ => long.MinValue,
    };
}
