using System.Text.Unicode;
using Evenhand.Monitoring.Charters;

namespace Evenhand.Monitoring.Records;

/// <summary>
/// Decodes rows of a table, such as CSV and Parquet, into batches: <see cref="Bind"/> once, then for each row
/// <see cref="Begin"/>, <see cref="Set"/> for each of <see cref="Columns"/> that has a value, and <see cref="End"/>.
/// </summary>
/// <remarks>
/// Cells are texts: what <see cref="JsonRecordDecoder"/> does with strings and numbers goes for them alike, and a cell that is not
/// set counts as absent. Nothing is allocated per row after the first ones. Not safe for use by several threads at once.
/// </remarks>
public sealed class RowDecoder
{
    private readonly RecordEncoder _encoder;
    private readonly RecordValue[] _values;
    private int[] _slotsOf = [];
    private int[] _slots = [];
    private byte[] _bytes = new byte[1024];
    private int _length;
    private bool _invalid;

    /// <summary>Prepares for the records of a charter.</summary>
    /// <param name="charter">The charter.</param>
    /// <param name="layout">Its layout; batches are made for the same.</param>
    /// <param name="hasher">The hash of ids.</param>
    /// <param name="kind">What the records are.</param>
    /// <exception cref="ArgumentException">Outcomes are asked for and the charter has no <c>id</c> or no <c>outcome</c>.</exception>
    public RowDecoder(Charter charter, RecordLayout layout, IdHasher hasher, RecordKind kind)
    {
        _encoder = new RecordEncoder(charter, layout, hasher, kind);
        _values = new RecordValue[_encoder.Places.Places.Count];
    }

    /// <summary>Event time, in microseconds since 1970-01-01T00:00:00Z, of records of a charter without <c>time</c>. Default 0.</summary>
    public long DefaultTime
    {
        get => _encoder.DefaultTime;
        set => _encoder.DefaultTime = value;
    }

    /// <summary>Indices of the columns that are read, ascending.</summary>
    public IReadOnlyList<int> Columns { get; private set; } = [];

    /// <summary>Finds the charter's places among a table's columns.</summary>
    /// <param name="columns">The columns' names; of equal names the first one is read.</param>
    /// <returns>The fields without a column; empty when every field has one.</returns>
    public IReadOnlyList<UnknownColumn> Bind(IReadOnlyList<string> columns)
    {
        ArgumentNullException.ThrowIfNull(columns);
        IReadOnlyList<string> places = _encoder.Places.Places;
        int[] columnOf = [.. places.Select(place => ColumnOf(columns, place))];
        Columns = [.. columnOf.Where(column => column >= 0).Distinct().Order()];
        _slotsOf = new int[columns.Count + 1];
        List<int> slots = [];
        for (int column = 0; column < columns.Count; column++)
        {
            slots.AddRange(Enumerable.Range(0, places.Count).Where(slot => columnOf[slot] == column));
            _slotsOf[column + 1] = slots.Count;
        }

        _slots = [.. slots];
        return
        [
            .. _encoder.Places.ReadFields
                .Where(field => field.At.Places.All(place => ColumnOf(columns, place) < 0))
                .Select(field => new UnknownColumn(field.Key, field.At.ToString(), NearestName.Of(field.At.Places, columns), field.Required)),
        ];
    }

    /// <summary>Starts a row.</summary>
    public void Begin()
    {
        Array.Clear(_values);
        _length = 0;
        _invalid = false;
    }

    /// <summary>Sets a cell of the row.</summary>
    /// <param name="column">The column's index.</param>
    /// <param name="cell">The cell's bytes; bytes that are not UTF-8 reject the row.</param>
    public void Set(int column, ReadOnlySpan<byte> cell)
    {
        if (_slotsOf[column] == _slotsOf[column + 1])
        {
            return;
        }

        if (_length + cell.Length > _bytes.Length)
        {
            Array.Resize(ref _bytes, Math.Max(_bytes.Length * 2, _length + cell.Length));
        }

        _invalid |= !Utf8.IsValid(cell);
        cell.CopyTo(_bytes.AsSpan(_length));
        RecordValue value = new(ValueKind.Text, _length, cell.Length);
        _length += cell.Length;
        for (int i = _slotsOf[column]; i < _slotsOf[column + 1]; i++)
        {
            _values[_slots[i]] = value;
        }
    }

    /// <summary>Ends the row as the batch's next entry, a record or a rejection; never throws for bad input.</summary>
    /// <param name="batch">Not full.</param>
    /// <param name="position">The row's position in its source, from 0, the header not counted.</param>
    public void End(RecordBatch batch, long position)
    {
        ArgumentNullException.ThrowIfNull(batch);
        RejectReason reason = _length > JsonRecordDecoder.MaximumLength ? RejectReason.TooLong
            : _invalid ? RejectReason.InvalidUtf8
            : _encoder.Encode(_bytes, _values, batch);
        if (reason == RejectReason.None)
        {
            batch.Accept(position);
        }
        else
        {
            batch.Reject(reason, position);
        }
    }

    private static int ColumnOf(IReadOnlyList<string> columns, string place)
    {
        int exact = IndexOf(columns, place);
        if (exact >= 0 || !place.StartsWith('/'))
        {
            return exact;
        }

        int bare = IndexOf(columns, place[1..]);
        return bare >= 0 ? bare : IndexOf(columns, place[1..].Replace("~1", "/", StringComparison.Ordinal).Replace("~0", "~", StringComparison.Ordinal));
    }

    private static int IndexOf(IReadOnlyList<string> columns, string name)
    {
        for (int column = 0; column < columns.Count; column++)
        {
            if (string.Equals(columns[column], name, StringComparison.Ordinal))
            {
                return column;
            }
        }

        return -1;
    }
}
