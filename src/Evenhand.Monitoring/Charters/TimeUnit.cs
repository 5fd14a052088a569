namespace Evenhand.Monitoring.Charters;

/// <summary>How event time is written.</summary>
public enum TimeUnit
{
    /// <summary>A string by RFC 3339.</summary>
    Rfc3339 = 0,

    /// <summary>Seconds since 1970-01-01T00:00:00Z, fractions allowed.</summary>
    Seconds = 1,

    /// <summary>Milliseconds since the same.</summary>
    Milliseconds = 2,

    /// <summary>Microseconds since the same.</summary>
    Microseconds = 3,
}
