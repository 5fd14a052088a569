namespace Evenhand.Monitoring.Windows;

/// <summary>The length of a bucket. The numbers are stored: they never change.</summary>
public enum Tier : byte
{
    /// <summary>One minute, kept 48 hours.</summary>
    Minute = 0,

    /// <summary>A quarter of an hour, kept 35 days.</summary>
    QuarterHour = 1,

    /// <summary>A calendar day in the charter's time zone, kept as long as the charter says.</summary>
    Day = 2,

    /// <summary>Everything there has been.</summary>
    All = 3,
}
