namespace Evenhand.Monitoring.Charters;

/// <summary>What a measure needs from the charter beside the decision and the groups.</summary>
[Flags]
public enum MeasureNeeds
{
    /// <summary>Nothing more.</summary>
    None = 0,

    /// <summary>A score.</summary>
    Score = 1,

    /// <summary>An outcome.</summary>
    Outcome = 2,

    /// <summary>Fields to adjust for.</summary>
    Adjust = 4,

    /// <summary>A field of its own, named by the rule.</summary>
    Field = 8,

    /// <summary>A circuit; the deciding model's rule is used where it is known, else the circuit's own decision.</summary>
    Circuit = 16,
}
