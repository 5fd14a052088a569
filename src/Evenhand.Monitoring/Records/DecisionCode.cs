namespace Evenhand.Monitoring.Records;

/// <summary>The decision of an encoded record. The numbers are stored: they never change.</summary>
public enum DecisionCode : byte
{
    /// <summary>One of the charter's unfavourable texts.</summary>
    Unfavourable = 0,

    /// <summary>One of the charter's favourable texts.</summary>
    Favourable = 1,

    /// <summary>One of the charter's other texts: counted, outside all rates.</summary>
    Other = 2,
}
