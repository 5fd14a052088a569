using System.Globalization;
using System.Security.Cryptography;

namespace Evenhand.Monitoring.Snapshots;

/// <summary>
/// Checks an exported chain line by line, from the lines alone: each snapshot's canonical form, hashes and
/// signature, and that each follows on the one before it. It goes on after a fault, so that all are reported.
/// </summary>
/// <remarks>
/// A chain shows that nothing in the middle was changed, taken out, put in or moved. It cannot show by
/// itself that its tail was cut or that all of it was written anew: for that give the head that was kept elsewhere,
/// and the key that is trusted. Not safe for use by several threads at once.
/// </remarks>
public sealed class ChainVerifier : IDisposable
{
    private readonly string? _expectedHead;
    private readonly SignatureCheck _signatures;
    private readonly CanonicalJsonWriter _canonical = new(4096);
    private readonly CanonicalJsonWriter _scratch = new(4096);
    private readonly List<ChainFault> _faults = [];
    private readonly ChainPlace _place = new();
    private long _line;
    private long _verified;
    private long? _expectedHeadAt;

    /// <summary>A check that has seen no line yet.</summary>
    /// <param name="expectedHead">
    /// The hash of the last snapshot, kept outside the store (64 hexadecimal digits, either case); null where none was kept.
    /// </param>
    /// <param name="trustedKey">
    /// The public key (P-256) that every snapshot must be signed with; null to check signatures only against the
    /// key each snapshot states. It stays the caller's to dispose of.
    /// </param>
    /// <exception cref="ArgumentException">The head is no SHA-256 hash or the key is not on P-256.</exception>
    public ChainVerifier(string? expectedHead = null, ECDsa? trustedKey = null)
    {
        _expectedHead = expectedHead?.ToLowerInvariant();
        if (_expectedHead is not null && !SnapshotSeal.IsHash(_expectedHead))
        {
            throw new ArgumentException("A head is 64 hexadecimal digits, the sha256 of a snapshot.", nameof(expectedHead));
        }

        _signatures = new SignatureCheck(trustedKey);
    }

    /// <summary>Checks a whole export held in memory.</summary>
    /// <param name="export">Lines ended by <c>\n</c>; the last may lack it.</param>
    /// <param name="expectedHead">As for the constructor.</param>
    /// <param name="trustedKey">As for the constructor.</param>
    /// <returns>What was found.</returns>
    public static ChainReport Verify(ReadOnlySpan<byte> export, string? expectedHead = null, ECDsa? trustedKey = null)
    {
        using var verifier = new ChainVerifier(expectedHead, trustedKey);
        while (!export.IsEmpty)
        {
            var end = export.IndexOf((byte)'\n');
            verifier.Check(end < 0 ? export : export[..end]);
            export = end < 0 ? [] : export[(end + 1)..];
        }

        return verifier.Complete();
    }

    /// <inheritdoc/>
    public void Dispose() => _signatures.Dispose();

    /// <summary>Checks the next line.</summary>
    /// <param name="line">
    /// The bytes before the <c>\n</c>; nothing trimmed. What follows the file's last <c>\n</c>, if empty, is no line.
    /// </param>
    public void Check(ReadOnlySpan<byte> line)
    {
        _line++;
        var before = _faults.Count;
        if (Read(line) is { } members)
        {
            CheckSnapshot(members);
        }
        else
        {
            _place.Unreadable();
        }

        _verified += _faults.Count == before ? 1 : 0;
    }

    /// <summary>Checks what can be said only of the whole, and reports.</summary>
    /// <returns>What was found in all lines.</returns>
    public ChainReport Complete()
    {
        var faults = new List<ChainFault>(_faults);
        if (_line == 0)
        {
            faults.Add(new ChainFault(0, null, ChainFaultKind.Empty, "The file is empty: it holds no snapshot."));
        }
        else if (_expectedHead is not null && _place.Head != _expectedHead)
        {
            faults.Add(HeadFault());
        }

        return new ChainReport
        {
            Verified = _verified,
            Faults = faults,
            Head = _place.Head,
            LastSequence = _place.Head is null ? null : _place.Sequence,
        };
    }

    private ChainFault HeadFault()
    {
        var end = _place.Head is null
            ? "no snapshot in the file could be read"
            : Text($"the file ends with snapshot {_place.Sequence}, whose hash is {_place.Head}");
        return _expectedHeadAt is { } at
            ? new ChainFault(_line, at, ChainFaultKind.HeadNotLast, Text(
                $"The head that was given is that of snapshot {at}, but {end}: later snapshots were added since that head was taken; compare with a newer one."))
            : new ChainFault(_line, _place.Sequence, ChainFaultKind.HeadDiffers, Text(
                $"The head that was given is not in the file; {end}: snapshots were cut off after it, or the chain was written anew."));
    }

    // The canonical members of a line, or null once the reason has been noted.
    private SnapshotMembers? Read(ReadOnlySpan<byte> line)
    {
        if (line.IsEmpty)
        {
            Add(ChainFaultKind.BlankLine, _place.Due, "the line is empty");
            return null;
        }

        _canonical.Clear();
        try
        {
            CanonicalJsonReader.Copy(line, _canonical);
        }
        catch (CanonicalJsonException e)
        {
            Add(ChainFaultKind.Unparseable, _place.Due, $"the line cannot be read as JSON. {e.Message.TrimEnd('.')}");
            return null;
        }

        var members = SnapshotMembers.Read(_canonical.Written.ToArray());
        if (members is null)
        {
            Add(ChainFaultKind.Unparseable, _place.Due, "the line is not a JSON object");
        }
        else if (!_canonical.Written.SequenceEqual(line))
        {
            Add(ChainFaultKind.NotCanonical, members.Whole("sequence") ?? _place.Due,
                "the line is not written as it was sealed (spaces, line ends, order of keys or the spelling of a value were changed)");
        }

        return members;
    }

    private void CheckSnapshot(SnapshotMembers members)
    {
        var stated = members.Whole("sequence");
        if (members.Text("format") is var format && format != SnapshotSeal.Format)
        {
            var found = format is null ? "the format is not stated" : $"the format '{format}' is unknown";
            Add(ChainFaultKind.UnknownFormat, stated ?? _place.Due, $"{found}; this program reads '{SnapshotSeal.Format}'");
            _place.Doubtful(stated, members.Text("sha256"), computed: null);
            return;
        }

        if (Malformed(members, stated) is { } what)
        {
            Add(ChainFaultKind.Malformed, stated ?? _place.Due, what);
            _place.Unreadable();
            return;
        }

        CheckSealed(members, stated!.Value);
    }

    private static string? Malformed(SnapshotMembers members, long? stated) =>
        stated is null or < 1 ? "its sequence is missing or no whole number from 1"
        : !SnapshotSeal.IsHash(members.Text("sha256")) ? "its sha256 is missing or not 64 lower-case hexadecimal digits"
        : !SnapshotSeal.IsHash(members.Text("previous_sha256")) ? "its previous_sha256 is missing or not 64 lower-case hexadecimal digits"
        : null;

    private void CheckSealed(SnapshotMembers members, long sequence)
    {
        var hash = SnapshotSeal.Hash(members, _scratch);
        string computed = SnapshotSeal.Hex(hash), stated = members.Text("sha256")!, previous = members.Text("previous_sha256")!;
        if (computed == stated)
        {
            Place(sequence, previous, stated);
            if (_signatures.Check(members, hash) is var (kind, what))
            {
                Add(kind, sequence, what);
            }
        }
        else
        {
            // One change must not be reported again at the next snapshot, so its place is taken on trust.
            sequence = _place.Doubtful(sequence, stated, computed);
            Add(ChainFaultKind.HashDiffers, sequence, "its contents do not give the hash it was sealed with, so it was changed after it was sealed");
        }

        CheckPart(members, sequence, "state", ChainFaultKind.StateHashDiffers);
        CheckPart(members, sequence, "circuit", ChainFaultKind.CircuitHashDiffers);
    }

    private void Place(long sequence, string previous, string hash)
    {
        if (_place.Add(sequence, previous, hash) is var (kind, what))
        {
            Add(kind, sequence, what);
        }

        if (hash == _expectedHead)
        {
            _expectedHeadAt = sequence;
        }
    }

    private void CheckPart(SnapshotMembers members, long sequence, string part, ChainFaultKind kind)
    {
        if (members[part] is { } bytes && members.Text(part + "_sha256") != SnapshotSeal.Hex(SHA256.HashData(bytes.Span)))
        {
            Add(kind, sequence, $"the {part} it carries does not give the hash that was sealed for it, so the {part} was changed or added afterwards");
        }
    }

    private void Add(ChainFaultKind kind, long? sequence, string what)
    {
        var subject = kind is ChainFaultKind.BlankLine or ChainFaultKind.Unparseable
            ? Text($"Line {_line}, where snapshot {sequence} is due")
            : Text($"Snapshot {sequence} (line {_line})");
        _faults.Add(new ChainFault(_line, sequence, kind, $"{subject}: {what}."));
    }

    private static string Text(FormattableString text) => text.ToString(CultureInfo.InvariantCulture);
}
