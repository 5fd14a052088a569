namespace Evenhand.Circuits.Learning;

/// <summary>How a profile circuit is learned.</summary>
public sealed record LearningOptions
{
    /// <summary>Number of profiles. Default 16.</summary>
    public int Profiles { get; init; } = 16;

    /// <summary>Seed of starts, orders and splits. Default 1.</summary>
    public int Seed { get; init; } = 1;

    /// <summary>Records in a mini-batch; null for a fiftieth of the sample, but 256 at least and 1,024 at most. Default null.</summary>
    public int? BatchRecords { get; init; }

    /// <summary>Most passes over the sample by mini-batches. Default 60.</summary>
    public int MostPasses { get; init; } = 60;

    /// <summary>Passes without a better held-out likelihood after which mini-batches stop. Default 10.</summary>
    public int Patience { get; init; } = 10;

    /// <summary>Most full-batch steps after the mini-batches. Default 20.</summary>
    public int MostSteps { get; init; } = 20;

    /// <summary>Share that a mini-batch takes of the running counts, in the first pass and in the last. Default 0.2 and 0.02.</summary>
    public (double First, double Last) Shares { get; init; } = (0.2, 0.02);

    /// <summary>Pseudo-records an entry. Default 0.1.</summary>
    public double Pseudo { get; init; } = 0.1;
}
