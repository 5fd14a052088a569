using Evenhand.Daemon.Stores.Sqlite;

namespace Evenhand.Daemon.Stores;

/// <summary>Where a store is: <c>sqlite:FILE</c>.</summary>
internal sealed record StoreUrl
{
    private const string SqlitePrefix = "sqlite:";

    private StoreUrl(string file) => File = file;

    /// <summary>The database file, as given.</summary>
    public string File { get; }

    /// <summary>Reads a store's URL.</summary>
    /// <exception cref="FormatException">Not a store that this version knows; the message says what is.</exception>
    public static StoreUrl Parse(string text)
    {
        ArgumentNullException.ThrowIfNull(text);
        if (text.StartsWith("postgresql:", StringComparison.OrdinalIgnoreCase) || text.StartsWith("postgres:", StringComparison.OrdinalIgnoreCase))
        {
            // The URL may hold a password, so it is not repeated.
            throw new FormatException("store postgresql://…: PostgreSQL is not in this version; use sqlite:FILE");
        }

        if (!text.StartsWith(SqlitePrefix, StringComparison.OrdinalIgnoreCase))
        {
            throw new FormatException($"store '{text}': not a store; write sqlite:FILE, such as sqlite:evidence.db");
        }

        string file = text[SqlitePrefix.Length..];
        if (string.IsNullOrWhiteSpace(file) || file.Contains('\0', StringComparison.Ordinal))
        {
            throw new FormatException($"store '{text}': the file is missing; write sqlite:FILE, such as sqlite:evidence.db");
        }

        return file.Equals(":memory:", StringComparison.OrdinalIgnoreCase)
            ? throw new FormatException($"store '{text}': a store in memory keeps no evidence; name a file")
            : new StoreUrl(file);
    }

    /// <summary>Opens the store for writing; makes it where there is none and brings an older one up to date.</summary>
    /// <exception cref="StoreHeldException">Another process writes to it.</exception>
    /// <exception cref="StoreException">It cannot be opened.</exception>
    public IStore Open() => SqliteStore.Open(File);

    /// <summary>Opens the store for reading, beside a writer if there is one: one view of it, as it stands now.</summary>
    /// <exception cref="StoreException">It does not exist or cannot be opened.</exception>
    public IEvidenceStore OpenReadOnly() => SqliteEvidence.Open(File);

    /// <inheritdoc/>
    public override string ToString() => SqlitePrefix + File;
}
