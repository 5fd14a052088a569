using System.Security.Cryptography;

namespace Evenhand.Daemon.Replay;

/// <summary>What a replay was asked for.</summary>
internal sealed record ReplayRequest
{
    /// <summary>The charter file.</summary>
    public required string Charter { get; init; }

    /// <summary>The inputs in order; <c>-</c> is stdin.</summary>
    public required IReadOnlyList<string> Inputs { get; init; }

    /// <summary>The as-of in microseconds since 1970-01-01T00:00:00Z; null means the end of the minute of the latest event time.</summary>
    public long? AsOf { get; init; }

    /// <summary>The store's URL; null keeps nothing.</summary>
    public string? Store { get; init; }

    /// <summary>The outcomes file; null without one.</summary>
    public string? Outcomes { get; init; }

    /// <summary>The key that signs the snapshot; null leaves it unsigned.</summary>
    public ECDsa? SigningKey { get; init; }

    /// <summary>Records read and added at a time; changes no bit of the result.</summary>
    public int BatchSize { get; init; } = 4096;

    /// <summary>Records between two commits to the store, at most.</summary>
    public int CommitEvery { get; init; } = 65536;
}
