namespace Evenhand.Monitoring.Charters;

/// <summary>A length of time as the charter writes it, such as <c>10m</c>, <c>24h</c>, <c>30d</c> or <c>7y</c>.</summary>
/// <param name="Text">The charter's own text; readings carry it unchanged.</param>
/// <param name="Length">The length; a day is 24 hours and a year 365 days. Always positive.</param>
public readonly record struct CharterDuration(string Text, TimeSpan Length)
{
    /// <summary>The length in microseconds, the unit of event time.</summary>
    public long Microseconds => Length.Ticks / TimeSpan.TicksPerMicrosecond;

    /// <summary>The charter's own text.</summary>
    public override string ToString() => Text;
}
