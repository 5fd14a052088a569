using System.Buffers;
using System.Globalization;
using System.Security.Cryptography;
using System.Text;
using System.Text.Json.Nodes;

namespace Evenhand.Monitoring.Snapshots;

/// <summary>
/// Gives a snapshot document its place in the chain: hashes (SHA-256, FIPS 180-4) over canonical JSON
/// (RFC 8785), the predecessor's hash, and a signature (ECDSA over P-256, FIPS 186-5) where there is a key.
/// The page <c>snapshot-format.md</c> beside this file gives the recipe in words.
/// </summary>
public static class SnapshotSeal
{
    /// <summary>The <c>format</c> of the documents sealed here.</summary>
    public const string Format = "evenhand-snapshot/1";

    /// <summary>The <c>previous_sha256</c> of the first snapshot: 64 zeros.</summary>
    public const string Genesis = "0000000000000000000000000000000000000000000000000000000000000000";

    internal const DSASignatureFormat Signing = DSASignatureFormat.IeeeP1363FixedFieldConcatenation;

    // What the hash leaves out: itself, what is made from it, and the two parts that stand in it by their own hash.
    internal static readonly string[] Unhashed = ["sha256", "signature", "state", "circuit"];

    private static readonly SearchValues<char> HexDigits = SearchValues.Create("0123456789abcdef");

    private static readonly string[] Parts = ["state", "circuit"];

    /// <summary>Seals a document; the document itself is left as it is.</summary>
    /// <param name="document">
    /// The snapshot without its seal. <c>format</c> may be absent; the seal's own keys (<c>sequence</c>,
    /// <c>previous_sha256</c>, <c>state_sha256</c>, <c>circuit_sha256</c>, <c>signing_key</c>, <c>sha256</c>,
    /// <c>signature</c>) are set anew whatever they hold.
    /// </param>
    /// <param name="sequence">The place in the chain, from 1.</param>
    /// <param name="previousSha256">The predecessor's hash, <see cref="Genesis"/> for sequence 1.</param>
    /// <param name="signingKey">A private key on P-256, or null for no signature.</param>
    /// <returns>The document as it is to be stored.</returns>
    /// <exception cref="ArgumentException">A format, sequence, hash or key that no chain could hold.</exception>
    /// <exception cref="CanonicalJsonException">The document holds a value without a canonical form.</exception>
    public static SealedSnapshot Seal(JsonObject document, long sequence, string previousSha256, ECDsa? signingKey = null)
    {
        ArgumentNullException.ThrowIfNull(document);
        CheckPlace(sequence, previousSha256);
        if (signingKey is not null)
        {
            CheckKey(signingKey, nameof(signingKey));
        }

        var members = Members(document);
        members["sequence"] = Encoding.UTF8.GetBytes(sequence.ToString(CultureInfo.InvariantCulture));
        members["previous_sha256"] = Quoted(previousSha256);
        foreach (var part in Parts)
        {
            members[part + "_sha256"] = members[part] is { } bytes ? Quoted(Hex(SHA256.HashData(bytes.Span))) : null;
        }

        members["signing_key"] = signingKey is null ? null : Quoted(PublicKey(signingKey));
        var writer = new CanonicalJsonWriter(4096);
        var hash = Hash(members, writer);
        members["sha256"] = Quoted(Hex(hash));
        members["signature"] = signingKey is null ? null : Quoted(Convert.ToBase64String(signingKey.SignHash(hash, Signing)));
        writer.Clear();
        members.Write(writer);
        return new SealedSnapshot(sequence, Hex(hash), writer.Written.ToArray());
    }

    /// <summary>
    /// Leaves <c>state</c> and <c>circuit</c> out of a sealed document. What remains still verifies, because
    /// only their hashes stand in the sealed part.
    /// </summary>
    /// <param name="sealedBytes">A document as stored.</param>
    /// <returns>The canonical bytes of the rest.</returns>
    /// <exception cref="CanonicalJsonException">The bytes are no JSON object.</exception>
    public static byte[] WithoutState(ReadOnlySpan<byte> sealedBytes)
    {
        var writer = new CanonicalJsonWriter(sealedBytes.Length);
        CanonicalJsonReader.Copy(sealedBytes, writer);
        var members = SnapshotMembers.Read(writer.Written.ToArray())
            ?? throw new CanonicalJsonException("At byte 0: a snapshot must be a JSON object.");
        writer.Clear();
        members.Write(writer, Parts);
        return writer.Written.ToArray();
    }

    internal static byte[] Hash(SnapshotMembers members, CanonicalJsonWriter scratch)
    {
        scratch.Clear();
        members.Write(scratch, Unhashed);
        return SHA256.HashData(scratch.Written);
    }

    internal static string Hex(ReadOnlySpan<byte> hash) => Convert.ToHexStringLower(hash);

    internal static bool IsHash(string? text) =>
        text is { Length: 64 } && text.AsSpan().IndexOfAnyExcept(HexDigits) < 0;

    /// <summary>A key's public half as it stands under <c>signing_key</c>.</summary>
    internal static string PublicKey(ECDsa key) => Convert.ToBase64String(key.ExportSubjectPublicKeyInfo());

    /// <summary>Refuses a key on another curve than P-256.</summary>
    internal static void CheckKey(ECDsa key, string parameter)
    {
        if (key.ExportParameters(includePrivateParameters: false).Curve.Oid.Value != ECCurve.NamedCurves.nistP256.Oid.Value)
        {
            throw new ArgumentException("Snapshots are signed with keys on the curve P-256; give such a key.", parameter);
        }
    }

    private static void CheckPlace(long sequence, string previousSha256)
    {
        ArgumentOutOfRangeException.ThrowIfLessThan(sequence, 1);
        ArgumentOutOfRangeException.ThrowIfGreaterThan(sequence, CanonicalJson.MaxSafeInteger);
        if (!IsHash(previousSha256))
        {
            throw new ArgumentException("A previous hash is 64 lower-case hexadecimal digits.", nameof(previousSha256));
        }

        if (sequence == 1 != (previousSha256 == Genesis))
        {
            throw new ArgumentException("The first snapshot, and no other, follows on 64 zeros.", nameof(previousSha256));
        }
    }

    private static SnapshotMembers Members(JsonObject document)
    {
        var members = new SnapshotMembers();
        foreach (var (name, value) in document)
        {
            members[name] = CanonicalJson.Serialize(value, depth: 1);
        }

        members["format"] ??= Quoted(Format);
        if (members.Text("format") != Format)
        {
            throw new ArgumentException($"Only documents of format '{Format}' are sealed here.", nameof(document));
        }

        members["sha256"] = null;
        members["signature"] = null;
        return members;
    }

    private static byte[] Quoted(string plain) => Encoding.UTF8.GetBytes($"\"{plain}\"");
}
