using System.Security.Cryptography;
using System.Text;
using System.Text.Json.Nodes;
using Evenhand.Daemon.Commands;
using Evenhand.Daemon.Replay;
using Evenhand.Daemon.Stores.Sqlite;
using Evenhand.Daemon.Tests.Replay;
using Evenhand.Monitoring.Charters;

namespace Evenhand.Daemon.Tests.Evidence;

/// <summary>A store with the signed snapshots of four replays, and the chain as its documents, for all tests of a class to read.</summary>
public sealed class EvidenceChain : IDisposable
{
    /// <summary>How many snapshots there are.</summary>
    public const int Count = 4;

    private readonly WorkFolder _folder = new();

    public EvidenceChain()
    {
        string charterFile = _folder.Write("grants.yaml", HarbourTown.Charter);
        string input = _folder.Write("grants.ndjson", HarbourTown.Stream(400, river: 8, hill: 5));
        Charter charter = CharterFile.Load(charterFile, CharterUse.Monitoring);
        using ECDsa key = ECDsa.Create(ECCurve.NamedCurves.nistP256);
        PublicKey = _folder.Write("key.pem", key.ExportSubjectPublicKeyInfoPem());
        using SqliteStore store = SqliteStore.Open(_folder.At("evidence.db"));
        for (int i = 1; i <= Count; i++)
        {
            ReplayRequest request = new() { Charter = charterFile, Inputs = [input], AsOf = AsOf + (i * 100 * 60_000_000L), SigningKey = key };
            new ReplayRun(charter, request, TimeProvider.System, progress: null).RunIn(store);
        }

        Documents = [.. store.Snapshots().Select(s => store.Snapshot(s.Sequence)!)];
        Heads = [.. store.Snapshots().Select(s => s.Sha256)];
        Store = $"sqlite:{_folder.At("evidence.db")}";
        File = Write("chain.ndjson", Documents);
    }

    /// <summary>2031-03-01T06:00:00Z, in microseconds since 1970: where the stream begins.</summary>
    private const long AsOf = 1_930_111_200_000_000;

    /// <summary>The stored documents in order.</summary>
    public byte[][] Documents { get; }

    /// <summary>Their hashes.</summary>
    public string[] Heads { get; }

    /// <summary>The store's URL.</summary>
    public string Store { get; }

    /// <summary>The documents as a file, one a line.</summary>
    public string File { get; }

    /// <summary>The public half of the key that signed them, as a file.</summary>
    public string PublicKey { get; }

    /// <summary>The path of a file beside the store.</summary>
    public string At(string name) => _folder.At(name);

    /// <summary>Writes documents as an exported file and returns its path.</summary>
    public string Write(string name, IEnumerable<byte[]> documents)
    {
        System.IO.File.WriteAllBytes(_folder.At(name), [.. documents.SelectMany(d => d.Append((byte)'\n'))]);
        return _folder.At(name);
    }

    /// <summary>Copies the store, so that a test can do with it what it likes.</summary>
    public string CopyStore(string name)
    {
        System.IO.File.Copy(_folder.At("evidence.db"), _folder.At(name), overwrite: true);
        return _folder.At(name);
    }

    /// <summary>A document as text, changed in one place, which it must have.</summary>
    public static byte[] Changed(byte[] document, string from, string to)
    {
        string text = Encoding.UTF8.GetString(document);
        int at = text.IndexOf(from, StringComparison.Ordinal);
        Assert.True(at >= 0, $"the document holds no {from}");
        return Encoding.UTF8.GetBytes(string.Concat(text.AsSpan(0, at), to, text.AsSpan(at + from.Length)));
    }

    /// <summary>A document as JSON.</summary>
    public static JsonObject Json(byte[] document) => JsonNode.Parse(document)!.AsObject();

    public void Dispose() => _folder.Dispose();
}
