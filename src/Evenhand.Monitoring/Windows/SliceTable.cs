using System.Text;
using Evenhand.Monitoring.Charters;

namespace Evenhand.Monitoring.Windows;

/// <summary>Which values of the slice fields have sums of their own; part of a shard's state.</summary>
/// <remarks>
/// A field's values are numbered in order of appearance (or as the charter lists them), at most
/// <see cref="SliceField.MaximumValues"/>; then come "other" and "missing". Numbers run over all fields, so that a bucket's
/// slice is one small integer: field f's value v is 1 + f · (8 + 2) + v.
/// </remarks>
public sealed class SliceTable
{
    private const int Stride = SliceField.MaximumValues + 2;

    private readonly IReadOnlyList<SliceField> _fields;
    private readonly List<byte[]>[] _values;

    /// <summary>An empty table, or one with the values that the charter lists.</summary>
    public SliceTable(IReadOnlyList<SliceField> fields)
    {
        ArgumentNullException.ThrowIfNull(fields);
        _fields = fields;
        _values = new List<byte[]>[fields.Count];
        for (int f = 0; f < fields.Count; f++)
        {
            _values[f] = [.. (fields[f].Values ?? []).Take(SliceField.MaximumValues).Select(Encoding.UTF8.GetBytes)];
        }
    }

    /// <summary>The values with sums of their own, by field.</summary>
    public IReadOnlyList<IReadOnlyList<string>> Values => [.. _values.Select(v => v.Select(Encoding.UTF8.GetString).ToArray())];

    /// <summary>The number of a record's slice, from 1; a value not seen before takes a place if one is free.</summary>
    public int NumberOf(int field, ReadOnlySpan<byte> utf8)
    {
        List<byte[]> values = _values[field];
        int first = 1 + (field * Stride);
        if (utf8.IsEmpty)
        {
            return first + SliceField.MaximumValues + 1;
        }

        for (int v = 0; v < values.Count; v++)
        {
            if (utf8.SequenceEqual(values[v]))
            {
                return first + v;
            }
        }

        if (_fields[field].Values is not null || values.Count == SliceField.MaximumValues)
        {
            return first + SliceField.MaximumValues;
        }

        values.Add(utf8.ToArray());
        return first + values.Count - 1;
    }

    /// <summary>The text of a slice as readings carry it, such as <c>version=3.2</c>; null for number 0.</summary>
    public string? Text(int slice)
    {
        if (slice == 0)
        {
            return null;
        }

        (int field, int value) = Math.DivRem(slice - 1, Stride);
        string name = value switch
        {
            SliceField.MaximumValues => SliceField.OtherValue,
            SliceField.MaximumValues + 1 => SliceField.MissingValue,
            _ => Encoding.UTF8.GetString(_values[field][value]),
        };
        return $"{_fields[field].Name}={name}";
    }

    /// <summary>Takes the values back from the store.</summary>
    /// <exception cref="StoredStateException">Another number of fields, or too many values.</exception>
    public void Load(IReadOnlyList<IReadOnlyList<string>> values)
    {
        ArgumentNullException.ThrowIfNull(values);
        if (values.Count != _values.Length || values.Any(v => v.Count > SliceField.MaximumValues))
        {
            throw new StoredStateException("the stored slices are not this charter's");
        }

        for (int f = 0; f < values.Count; f++)
        {
            _values[f] = [.. values[f].Select(Encoding.UTF8.GetBytes)];
        }
    }
}
