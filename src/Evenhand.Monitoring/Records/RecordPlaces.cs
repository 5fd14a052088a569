using Evenhand.Monitoring.Charters;

namespace Evenhand.Monitoring.Records;

/// <summary>The places that a charter reads in records of a kind, each once, and which field reads which.</summary>
internal sealed class RecordPlaces
{
    private readonly List<string> _places = [];
    private readonly List<int> _order = [];
    private readonly List<ReadField> _fields = [];

    public RecordPlaces(Charter charter, RecordLayout layout, RecordKind kind)
    {
        bool decision = kind == RecordKind.Decision;
        LabelFeed? feed = kind == RecordKind.Label ? charter.LabelFeed : null;
        Id = feed is null ? Read("id", charter.RecordId, required: true) : Read("labels: join", feed.Join, required: true);
        Revision = Read("revision", feed is null ? charter.Revision : null, required: decision);
        Time = Read("time", charter.Time?.At, required: decision);
        Outcome = Read("outcome", feed is null ? charter.Outcome?.At : null, required: !decision);
        Decision = Read("decision", decision ? charter.Decision?.At : null, required: true);
        Score = Read("score", decision ? charter.Score?.At : null, required: true);
        Fields = decision
            ? [.. layout.Fields.Select((field, i) => Read($"{(i < layout.Groups ? "groups" : "inputs")}: {field.Name}", field.At, required: true))]
            : feed is null ? [] : [.. layout.Fields.Select((field, i) => Read($"labels: {field.Name}", i < layout.Groups ? feed.At.GetValueOrDefault(field.Name) : null, required: true))];
        Slices = decision ? [.. charter.Slices.Select(slice => Read($"slices: {slice.Name}", slice.At, required: true))] : [];
        Order = [.. _order];
    }

    /// <summary>The distinct places; an index here is called a slot.</summary>
    public IReadOnlyList<string> Places => _places;

    /// <summary>Slots by field, in the charter's order of places.</summary>
    public int[] Order { get; }

    /// <summary>Every field that is read, for messages.</summary>
    public IReadOnlyList<ReadField> ReadFields => _fields;

    public PlaceRange Id { get; }

    public PlaceRange Revision { get; }

    public PlaceRange Time { get; }

    public PlaceRange Decision { get; }

    public PlaceRange Score { get; }

    public PlaceRange Outcome { get; }

    public PlaceRange[] Fields { get; }

    public PlaceRange[] Slices { get; }

    private PlaceRange Read(string key, FieldPath? at, bool required)
    {
        if (at is null)
        {
            return default;
        }

        PlaceRange range = new(_order.Count, at.Places.Count);
        foreach (string place in at.Places)
        {
            _order.Add(SlotOf(place));
        }

        _fields.Add(new ReadField(key, at, range, required));
        return range;
    }

    private int SlotOf(string place)
    {
        int slot = _places.IndexOf(place);
        if (slot < 0)
        {
            slot = _places.Count;
            _places.Add(place);
        }

        return slot;
    }

    /// <summary>A field with its places.</summary>
    /// <param name="Key">The charter's key, such as <c>groups: language</c>.</param>
    /// <param name="At">The places as the charter has them.</param>
    /// <param name="Range">The places as slots.</param>
    /// <param name="Required">Whether a table must have a column for it.</param>
    internal sealed record ReadField(string Key, FieldPath At, PlaceRange Range, bool Required);
}
