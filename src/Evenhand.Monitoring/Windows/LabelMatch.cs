namespace Evenhand.Monitoring.Windows;

/// <summary>What a feed of labels had for a decision.</summary>
public enum LabelMatch
{
    /// <summary>Nothing that the record lacked.</summary>
    None = 0,

    /// <summary>At least one label that the record lacked.</summary>
    Filled = 1,

    /// <summary>An entry that came too late, or is not known yet at the as-of.</summary>
    Late = 2,
}
