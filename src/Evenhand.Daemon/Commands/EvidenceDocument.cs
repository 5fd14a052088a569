using System.Text.Json.Nodes;
using Evenhand.Daemon.Evidence;
using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Snapshots;

namespace Evenhand.Daemon.Commands;

/// <summary>Stored documents as commands read them. They come from outside: whatever stands in place of a snapshot is said in one line.</summary>
internal static class EvidenceDocument
{
    /// <summary>Reads a document.</summary>
    /// <param name="bytes">The document.</param>
    /// <param name="name">What the chain is called in messages.</param>
    /// <exception cref="CommandFailure">Not a JSON object.</exception>
    public static JsonObject Parse(byte[] bytes, string name) => DocumentJson.TryParse(bytes) ?? throw NoSnapshot(name);

    /// <summary>Does something with a document that may not be laid out as a snapshot.</summary>
    /// <exception cref="CommandFailure">It is not.</exception>
    public static T Read<T>(string name, Func<T> read)
    {
        try
        {
            return read();
        }
        catch (Exception e) when (e is NullReferenceException or InvalidOperationException or KeyNotFoundException or FormatException or OverflowException or ArgumentException)
        {
            throw new CommandFailure(1, $"{name}: a snapshot is not laid out as this program writes it; evidence verify says whether it was changed");
        }
    }

    /// <summary>The document without state and circuit.</summary>
    /// <exception cref="CommandFailure">Not a JSON object.</exception>
    public static byte[] WithoutState(byte[] bytes, string name)
    {
        try
        {
            return SnapshotSeal.WithoutState(bytes);
        }
        catch (CanonicalJsonException)
        {
            throw NoSnapshot(name);
        }
    }

    /// <summary>Derives the readings again from the state and compares.</summary>
    /// <exception cref="CommandFailure">The document has no state, no charter, or none that this version can read.</exception>
    public static RecomputeReport Recompute(JsonObject document, string name)
    {
        string text = Read(name, () => (string?)document["charter"]?["text"]) ?? throw new CommandFailure(2, $"{name}: the snapshot carries no charter");
        CharterResult result = CharterParser.Parse("charter", System.Text.Encoding.UTF8.GetBytes(text));
        Charter charter = result.Charter ?? throw new CommandFailure(2, $"{name}: this version cannot read the snapshot's charter: {result.Problems[0]}");
        return Read(name, () =>
        {
            try
            {
                return Recomputation.Compare(document, charter);
            }
            catch (FormatException e)
            {
                throw new CommandFailure(2, $"{name}: {e.Message}");
            }
        });
    }

    private static CommandFailure NoSnapshot(string name) => new(1, $"{name}: a line holds no snapshot; evidence verify names it");
}
