using System.Runtime.InteropServices;
using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Records;

namespace Evenhand.Monitoring.Windows;

/// <summary>The group labels of a feed by the id of their decision; the first of an id counts.</summary>
/// <remarks>
/// Memory grows with the feed, not with the decisions. A feed that is complete when decisions are read holds no decision back: a label
/// that is not there, or came too late, stays missing.
/// </remarks>
public sealed class LabelIndex
{
    private readonly int _groups;
    private readonly ushort[] _missing;
    private readonly long _wait;
    private readonly Dictionary<IdHash, int> _places = [];
    private readonly List<long> _times = [];
    private readonly List<ushort> _codes = [];

    /// <summary>An empty index.</summary>
    /// <param name="charter">A charter with a feed of labels.</param>
    /// <param name="layout">Its layout.</param>
    public LabelIndex(Charter charter, RecordLayout layout)
    {
        ArgumentNullException.ThrowIfNull(charter);
        ArgumentNullException.ThrowIfNull(layout);
        _groups = layout.Groups;
        _missing = [.. layout.Fields.Take(_groups).Select(f => (ushort)f.MissingCode)];
        _wait = charter.LabelFeed?.Wait.Microseconds ?? throw new ArgumentException("the charter has no feed of labels", nameof(charter));
    }

    /// <summary>Entries kept.</summary>
    public int Count => _times.Count;

    /// <summary>Entries whose id had one already.</summary>
    public long Duplicates { get; private set; }

    /// <summary>Takes the labels of a batch.</summary>
    /// <param name="batch">Read as label records.</param>
    public void Add(RecordBatch batch)
    {
        ArgumentNullException.ThrowIfNull(batch);
        for (int i = 0; i < batch.Count; i++)
        {
            if (batch.Rejected[i] != RejectReason.None)
            {
                continue;
            }

            ref int place = ref CollectionsMarshal.GetValueRefOrAddDefault(_places, batch.CaseIds[i], out bool exists);
            if (exists)
            {
                Duplicates++;
                continue;
            }

            place = _times.Count;
            _times.Add(batch.Times[i]);
            _codes.AddRange(batch.CodesOf(i)[.._groups]);
        }
    }

    /// <summary>Fills the missing labels of a decision; labels that the record has itself stay.</summary>
    /// <param name="id">The decision's id without its revision.</param>
    /// <param name="decided">Its event time in microseconds.</param>
    /// <param name="asOf">Labels at or after this instant are not known yet.</param>
    /// <param name="codes">Its codes, groups first.</param>
    public LabelMatch Fill(IdHash id, long decided, long asOf, Span<ushort> codes)
    {
        if (!IsWanting(codes) || !_places.TryGetValue(id, out int place))
        {
            return LabelMatch.None;
        }

        long time = _times[place];
        if (time != long.MinValue && (time >= asOf || time - decided > _wait))
        {
            return LabelMatch.Late;
        }

        ReadOnlySpan<ushort> labels = CollectionsMarshal.AsSpan(_codes).Slice(place * _groups, _groups);
        LabelMatch match = LabelMatch.None;
        for (int g = 0; g < labels.Length; g++)
        {
            if (codes[g] == _missing[g] && labels[g] != _missing[g])
            {
                codes[g] = labels[g];
                match = LabelMatch.Filled;
            }
        }

        return match;
    }

    private bool IsWanting(ReadOnlySpan<ushort> codes)
    {
        for (int g = 0; g < _groups; g++)
        {
            if (codes[g] == _missing[g])
            {
                return true;
            }
        }

        return false;
    }
}
