namespace Evenhand.Monitoring.Windows;

/// <summary>What a look for a decision's outcome came to.</summary>
public enum OutcomeMatch
{
    /// <summary>No outcome is known.</summary>
    None = 0,

    /// <summary>There is one, and it counts.</summary>
    Counts = 1,

    /// <summary>There is one, before the decision or later than allowed.</summary>
    Outside = 2,
}
