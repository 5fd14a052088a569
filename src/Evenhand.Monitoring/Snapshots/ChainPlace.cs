using System.Globalization;

namespace Evenhand.Monitoring.Snapshots;

/// <summary>
/// Where in the chain the check stands: the latest snapshot in the chain's order and the sequences passed
/// over. A snapshot that stands too late, or twice, does not move the place, so that one misplaced line
/// is one or two faults and not one for each line after it.
/// </summary>
internal sealed class ChainPlace
{
    private readonly List<(long From, long To)> _missing = [];

    // What the next previous_sha256 may be. Two hashes where the latest snapshot's contents and stated hash
    // disagree (that has been reported); none where the latest line could not be read.
    private string? _stated = SnapshotSeal.Genesis;
    private string? _computed;

    // Lines since the latest snapshot that could not be read: each may stand for one sequence, or be put in.
    private long _unreadable;
    private bool _started;

    /// <summary>The latest sequence in order; 0 before the first.</summary>
    public long Sequence { get; private set; }

    /// <summary>The hash of the latest snapshot in order; null before the first.</summary>
    public string? Head { get; private set; }

    /// <summary>The sequence due on the next line.</summary>
    public long Due => Sequence + 1 + _unreadable;

    /// <summary>Notes a line that could not be read.</summary>
    public void Unreadable() => _unreadable++;

    /// <summary>Notes a snapshot that is known to be damaged; its fault has been reported.</summary>
    /// <returns>The sequence it is taken to have.</returns>
    public long Doubtful(long? sequence, string? stated, string? computed)
    {
        var place = sequence is { } s && s >= Sequence + 1 && s <= Due ? s : Due;
        Move(place, SnapshotSeal.IsHash(stated) ? stated : computed, computed);
        return place;
    }

    /// <summary>Notes a snapshot that is whole in itself.</summary>
    /// <returns>What is wrong with its place, or null.</returns>
    public (ChainFaultKind Kind, string What)? Add(long sequence, string previous, string hash)
    {
        if (sequence <= Sequence)
        {
            return Behind(sequence);
        }

        var fault = Ahead(sequence, previous);
        Move(sequence, hash, null);
        return fault;
    }

    private (ChainFaultKind Kind, string What)? Behind(long sequence)
    {
        var at = _missing.FindIndex(range => range.From <= sequence && sequence <= range.To);
        if (at < 0)
        {
            return (ChainFaultKind.SequenceRepeated, "this sequence stands in the file before, so a snapshot was put in or doubled");
        }

        var (from, to) = _missing[at];
        _missing.RemoveAt(at);
        AddMissing(from, sequence - 1);
        AddMissing(sequence + 1, to);
        return (ChainFaultKind.SequenceOutOfOrder, Text($"it stands after snapshot {Sequence}, so the order was changed"));
    }

    private (ChainFaultKind Kind, string What)? Ahead(long sequence, string previous)
    {
        if (sequence > Due)
        {
            AddMissing(Due, sequence - 1);
            var missing = sequence - 1 == Due ? Text($"snapshot {Due} is") : Text($"snapshots {Due} to {sequence - 1} are");
            return _started || _unreadable > 0
                ? (ChainFaultKind.SequenceGap, $"{missing} missing before it")
                : (ChainFaultKind.StartMissing, $"the chain does not start at 1; {missing} missing");
        }

        // Straight after the latest snapshot its hash is known; past unreadable lines it is not.
        if (sequence > Sequence + 1 || previous == _stated || previous == _computed || _stated is null)
        {
            return null;
        }

        return (ChainFaultKind.PreviousHashDiffers, _started
            ? Text($"it does not follow on snapshot {Sequence} as that stands in the file, so snapshot {Sequence} was changed or replaced after it was sealed, or this one was")
            : "it is the first, but does not follow on 64 zeros, so the start of the chain was replaced");
    }

    private void Move(long sequence, string? stated, string? computed)
    {
        Sequence = sequence;
        Head = stated ?? Head;
        (_stated, _computed) = (stated, computed);
        _unreadable = 0;
        _started = true;
    }

    private void AddMissing(long from, long to)
    {
        if (from <= to)
        {
            _missing.Add((from, to));
        }
    }

    private static string Text(FormattableString text) => text.ToString(CultureInfo.InvariantCulture);
}
