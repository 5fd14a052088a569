namespace Evenhand.Monitoring.Records;

/// <summary>The outcome of an encoded record. The numbers are stored: they never change.</summary>
public enum OutcomeCode : byte
{
    /// <summary>Not known (yet).</summary>
    Unknown = 0,

    /// <summary>One of the charter's positive texts.</summary>
    Positive = 1,

    /// <summary>One of the charter's negative texts.</summary>
    Negative = 2,
}
