namespace Evenhand.Monitoring.Records;

/// <summary>The event times that can be used: the years 1000 to 8999, in UTC.</summary>
/// <remarks>
/// Windows, baselines and local days reach years before and after an event, so a millennium is kept free at either end of the
/// calendar. Instants there are fillers for "no date" anyway.
/// </remarks>
public static class EventTimeRange
{
    private static readonly long First = MicrosecondsOf(new DateTime(1000, 1, 1, 0, 0, 0, DateTimeKind.Utc));
    private static readonly long End = MicrosecondsOf(new DateTime(9000, 1, 1, 0, 0, 0, DateTimeKind.Utc));

    /// <summary>Whether an instant can be used.</summary>
    /// <param name="time">Microseconds since 1970-01-01T00:00:00Z.</param>
    public static bool Contains(long time) => time >= First && time < End;

    private static long MicrosecondsOf(DateTime moment) => moment.Subtract(DateTime.UnixEpoch).Ticks / TimeSpan.TicksPerMicrosecond;
}
