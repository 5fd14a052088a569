using System.Globalization;

namespace Evenhand.Monitoring.Windows;

/// <summary>Event time: microseconds since 1970-01-01T00:00:00Z, within <see cref="Records.EventTimeRange"/>.</summary>
public static class EventTime
{
    /// <summary>Microseconds in a minute.</summary>
    public const long Minute = 60_000_000;

    /// <summary>Microseconds in a quarter of an hour.</summary>
    public const long QuarterHour = 15 * Minute;

    /// <summary>Microseconds in an hour.</summary>
    public const long Hour = 60 * Minute;

    /// <summary>Microseconds in a day of 24 hours.</summary>
    public const long Day = 24 * Hour;

    /// <summary>The largest multiple of <paramref name="unit"/> not above a time.</summary>
    public static long Floor(long time, long unit)
    {
        long rest = time % unit;
        return time - (rest < 0 ? rest + unit : rest);
    }

    /// <summary>RFC 3339 in UTC with as many decimals as needed, such as <c>2031-04-01T06:00:00Z</c>.</summary>
    public static string Text(long time)
    {
        DateTime moment = DateTime.UnixEpoch.AddTicks(time * TimeSpan.TicksPerMicrosecond);
        string format = time % 1_000_000 == 0 ? "yyyy-MM-dd'T'HH:mm:ss'Z'" : "yyyy-MM-dd'T'HH:mm:ss.FFFFFF'Z'";
        return moment.ToString(format, CultureInfo.InvariantCulture);
    }
}
