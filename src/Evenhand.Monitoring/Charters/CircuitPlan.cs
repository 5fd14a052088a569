namespace Evenhand.Monitoring.Charters;

/// <summary>How the circuit of the population is learnt and kept up to date.</summary>
public sealed record CircuitPlan
{
    /// <summary>Number of profiles; null means chosen on held-out data.</summary>
    public int? Profiles { get; init; } = 16;

    /// <summary>Training sample relative to the charter; null where the stream's first records serve.</summary>
    public string? Sample { get; init; }

    /// <summary>Records to learn from before the first circuit, where there is no sample.</summary>
    public long? WarmUp { get; init; }

    /// <summary>How far back the online circuit looks.</summary>
    public CharterDuration Window { get; init; } = new("30d", TimeSpan.FromDays(30));

    /// <summary>What the training sample is worth as a prior, in records; null means the smaller of its size and 2,000.</summary>
    public double? PriorRecords { get; init; }
}
