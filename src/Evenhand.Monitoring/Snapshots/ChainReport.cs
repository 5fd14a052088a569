namespace Evenhand.Monitoring.Snapshots;

/// <summary>What the check of a chain found.</summary>
public sealed record ChainReport
{
    /// <summary>How many snapshots are in order in themselves and in their place.</summary>
    public required long Verified { get; init; }

    /// <summary>Everything that is wrong, in the order of the file.</summary>
    public required IReadOnlyList<ChainFault> Faults { get; init; }

    /// <summary>The hash of the last snapshot in the chain's order; null where none could be read.</summary>
    public required string? Head { get; init; }

    /// <summary>The sequence of the last snapshot in the chain's order; null where none could be read.</summary>
    public required long? LastSequence { get; init; }

    /// <summary>True where nothing is wrong.</summary>
    public bool Intact => Faults.Count == 0;
}
