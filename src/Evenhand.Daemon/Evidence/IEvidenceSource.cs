namespace Evenhand.Daemon.Evidence;

/// <summary>A chain of snapshots to look at: in a store, or in an exported file.</summary>
internal interface IEvidenceSource : IDisposable
{
    /// <summary>What it is called in messages.</summary>
    string Name { get; }

    /// <summary>The stored documents in order, byte for byte.</summary>
    IEnumerable<byte[]> Documents();

    /// <summary>The document of a sequence; null where there is none.</summary>
    byte[]? Document(long sequence);

    /// <summary>What is wrong beside the documents themselves, a sentence each.</summary>
    IEnumerable<string> OtherFaults();
}
