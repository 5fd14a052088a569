namespace Evenhand.Monitoring.Disclosure;

/// <summary>A part of a cell that can be withheld apart from the rest.</summary>
public enum WithheldPart
{
    /// <summary>The whole cell.</summary>
    All = 0,

    /// <summary>What rests on outcomes.</summary>
    Outcomes = 1,

    /// <summary>What rests on scores.</summary>
    Scores = 2,

    /// <summary>The counts by stratum in the state; readings adjusted for strata stand on many at once and stay.</summary>
    Strata = 3,

    /// <summary>Readings adjusted for strata as well, because their denominators would give a cell away.</summary>
    Adjusted = 4,

    /// <summary>The share of records whose labels are listed; of the grouping, not of a cell.</summary>
    KnownShare = 5,
}
