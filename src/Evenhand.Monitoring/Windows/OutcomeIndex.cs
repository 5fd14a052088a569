using System.Runtime.InteropServices;
using Evenhand.Monitoring.Records;

namespace Evenhand.Monitoring.Windows;

/// <summary>The outcomes of an outcomes file by the id of their decision; the first of an id counts.</summary>
/// <remarks>Memory grows with the outcomes file, not with the decisions.</remarks>
public sealed class OutcomeIndex
{
    private readonly Dictionary<IdHash, int> _places = [];
    private readonly List<(long Time, OutcomeCode Outcome)> _outcomes = [];
    private byte[] _found = [];

    /// <summary>Outcomes whose id had one already.</summary>
    public long Duplicates { get; private set; }

    /// <summary>Outcomes kept.</summary>
    public int Count => _outcomes.Count;

    /// <summary>Outcomes whose decision has been seen.</summary>
    public int FoundCount => _found.Sum(b => int.PopCount(b));

    /// <summary>Bits of the outcomes whose decision has been seen; part of a run's state.</summary>
    public byte[] Found => _found;

    /// <summary>Takes the outcomes of a batch.</summary>
    /// <param name="batch">Read as outcome records.</param>
    public void Add(RecordBatch batch)
    {
        ArgumentNullException.ThrowIfNull(batch);
        for (int i = 0; i < batch.Count; i++)
        {
            if (batch.Rejected[i] != RejectReason.None)
            {
                continue;
            }

            ref int place = ref CollectionsMarshal.GetValueRefOrAddDefault(_places, batch.Ids[i], out bool exists);
            if (exists)
            {
                Duplicates++;
                continue;
            }

            place = _outcomes.Count;
            _outcomes.Add((batch.Times[i], batch.Outcomes[i]));
        }

        Array.Resize(ref _found, (_outcomes.Count + 7) / 8);
    }

    /// <summary>Whether there is an outcome under an id.</summary>
    public bool Has(IdHash id) => _places.ContainsKey(id);

    /// <summary>Takes the bits of found outcomes back from the store.</summary>
    public void LoadFound(ReadOnlySpan<byte> found)
    {
        if (found.Length != _found.Length)
        {
            throw new StoredStateException("the stored run has another number of outcomes than the file");
        }

        found.CopyTo(_found);
    }

    /// <summary>Looks for the outcome of a decision.</summary>
    /// <param name="id">The decision's id.</param>
    /// <param name="decided">The decision's event time in microseconds.</param>
    /// <param name="within">How much later an outcome may come, in microseconds.</param>
    /// <param name="asOf">Outcomes at or after this instant are not known yet.</param>
    /// <param name="outcome">The outcome, or unknown.</param>
    /// <param name="isFirst">Whether this is the first decision that the outcome is found for.</param>
    /// <returns>Whether there is one that counts, one that came outside the time allowed, or none.</returns>
    public OutcomeMatch Find(IdHash id, long decided, long within, long asOf, out OutcomeCode outcome, out bool isFirst)
    {
        outcome = OutcomeCode.Unknown;
        isFirst = false;
        if (!_places.TryGetValue(id, out int place))
        {
            return OutcomeMatch.None;
        }

        byte bit = (byte)(1 << (place % 8));
        isFirst = (_found[place / 8] & bit) == 0;
        _found[place / 8] |= bit;
        (long time, OutcomeCode found) = _outcomes[place];
        if (time != long.MinValue)
        {
            if (time >= asOf)
            {
                return OutcomeMatch.None;
            }

            if (time < decided || time - decided > within)
            {
                return OutcomeMatch.Outside;
            }
        }

        outcome = found;
        return OutcomeMatch.Counts;
    }
}
