using NodaTime;
using NodaTime.TimeZones;

namespace Evenhand.Monitoring.Windows;

/// <summary>The calendar days of a time zone as stretches of event time.</summary>
/// <remarks>
/// Days have 23, 24 or 25 hours where clocks change; a day whose midnight does not exist begins at its first instant, and one that was left out altogether has no length.
/// Starts are rounded down to a whole minute, which matters only for zones of long ago with odd seconds. Not thread-safe.
/// </remarks>
public sealed class LocalDays
{
    private static readonly long FirstDay = Instant.FromUtc(1, 1, 2, 0, 0).ToUnixTimeTicks() / TimeSpan.TicksPerMicrosecond;

    private readonly DateTimeZone _zone;
    private long _start;
    private long _end;

    /// <summary>Takes the days of a zone.</summary>
    /// <param name="timeZone">A tz database name.</param>
    /// <exception cref="ArgumentException">No such zone.</exception>
    public LocalDays(string timeZone)
    {
        _zone = DateTimeZoneProviders.Tzdb.GetZoneOrNull(timeZone)
            ?? throw new ArgumentException($"unknown time zone {timeZone}", nameof(timeZone));
    }

    /// <summary>The day that holds an instant, as [Start, End).</summary>
    /// <param name="time">Microseconds since 1970-01-01T00:00:00Z.</param>
    public (long Start, long End) DayOf(long time)
    {
        if (time < _start || time >= _end)
        {
            LocalDate date = InstantOf(time).InZone(_zone).Date;
            (_start, _end) = (StartOf(date), StartOf(date.PlusDays(1)));
        }

        return (_start, _end);
    }

    /// <summary>The start of the day a number of days before the day that holds an instant.</summary>
    public long StartOfDayBefore(long time, int days) => StartOf(InstantOf(time).InZone(_zone).Date.PlusDays(-days));

    private static Instant InstantOf(long time) => Instant.FromUnixTimeTicks(Math.Max(time, FirstDay) * TimeSpan.TicksPerMicrosecond);

    /// <summary>The start of a day; of the next one that there is where a zone has left the day out, as some did to cross the date line.</summary>
    private long StartOf(LocalDate date)
    {
        long ticks = _zone.ResolveLocal(date.AtMidnight(), Resolvers.CreateMappingResolver(Resolvers.ReturnEarlier, Resolvers.ReturnStartOfIntervalAfter)).ToInstant().ToUnixTimeTicks();
        long minutes = Math.DivRem(ticks, TimeSpan.TicksPerMinute, out long rest);
        return (rest < 0 ? minutes - 1 : minutes) * EventTime.Minute;
    }
}
