using Evenhand.Daemon.Stores;

namespace Evenhand.Daemon.Evidence;

/// <summary>The chain in a store.</summary>
internal sealed class StoreEvidence(IEvidenceStore store, string name) : IEvidenceSource
{
    /// <inheritdoc/>
    public string Name => name;

    /// <inheritdoc/>
    public IEnumerable<byte[]> Documents() => store.Snapshots().Select(s => store.Snapshot(s.Sequence)!);

    /// <inheritdoc/>
    public byte[]? Document(long sequence) => store.Snapshot(sequence);

    /// <inheritdoc/>
    public IEnumerable<string> OtherFaults()
    {
        foreach (string guard in store.MissingGuards())
        {
            yield return $"the store's guard {guard} is gone: snapshots could have been changed";
        }

        IReadOnlyList<SnapshotEntry> entries = store.Snapshots();
        foreach (SnapshotEntry entry in entries)
        {
            if (Difference(entry) is { } column)
            {
                yield return $"sequence {entry.Sequence}: the column {column} beside the document differs from it";
            }
        }

        ChainHead head = store.Head();
        long last = entries.Count == 0 ? 0 : entries[^1].Sequence;
        if (head.Sequence != last || (last > 0 && head.Sha256 != entries[^1].Sha256))
        {
            yield return $"the store's head names sequence {head.Sequence}, the last snapshot is {last}: snapshots are missing at the end";
        }
    }

    /// <inheritdoc/>
    public void Dispose() => store.Dispose();

    private string? Difference(SnapshotEntry entry)
    {
        if (DocumentJson.TryParse(store.Snapshot(entry.Sequence)!) is not { } document)
        {
            // The verifier names it.
            return null;
        }

        return DocumentJson.Text(document, "kind") != entry.Kind ? "kind"
            : DocumentJson.Text(document["charter"], "id") != entry.Charter ? "charter"
            : DocumentJson.Text(document, "as_of") != entry.AsOf ? "as_of"
            : DocumentJson.Text(document, "created_at") != entry.CreatedAt ? "created_at"
            : DocumentJson.Text(document, "previous_sha256") != entry.PreviousSha256 ? "previous_sha256"
            : DocumentJson.Text(document, "sha256") != entry.Sha256 ? "sha256"
            : null;
    }
}
