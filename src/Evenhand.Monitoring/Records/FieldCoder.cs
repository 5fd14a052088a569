using Evenhand.Monitoring.Charters;

namespace Evenhand.Monitoring.Records;

/// <summary>Turns the text of a coded field into its code, without allocation.</summary>
/// <remarks>
/// Listed texts are compared by exact bytes. A numeric field's text is looked up among <c>missing</c> and <c>declined</c>
/// first and read as a number then: an optional sign, digits, a point, an exponent. A quantile field without cut points
/// gives any finite number code 0.
/// </remarks>
public sealed class FieldCoder
{
    private const int CountedBands = 16;

    private readonly TextTable _texts = new();
    private readonly double[]? _bands;
    private readonly bool _quantiles;

    private readonly NumberSample? _numbers;
    private readonly int _index;

    /// <summary>Prepares a field's texts.</summary>
    /// <param name="field">The field.</param>
    /// <param name="numbers">Where its numbers are to be kept; null for nowhere.</param>
    /// <param name="index">The field's place there.</param>
    public FieldCoder(CodedField field, NumberSample? numbers = null, int index = 0)
    {
        ArgumentNullException.ThrowIfNull(field);
        _numbers = numbers;
        _index = index;
        Missing = checked((ushort)field.MissingCode);
        Unlisted = checked((ushort)field.UnlistedCode);
        _bands = field.Bands is null ? null : [.. field.Bands];
        _quantiles = field.IsNumeric && field.Bands is null;
        Fill(field);
    }

    /// <summary>The code of a missing value.</summary>
    public ushort Missing { get; }

    /// <summary>The code of a value that the charter does not list.</summary>
    public ushort Unlisted { get; }

    /// <summary>The code of a text.</summary>
    /// <param name="utf8">A string's value, a number's digits, <c>true</c> or <c>false</c>; empty means missing.</param>
    public ushort Code(ReadOnlySpan<byte> utf8)
    {
        if (utf8.IsEmpty)
        {
            return Missing;
        }

        int code = _texts.Count > 0 ? _texts.Find(utf8) : TextTable.None;
        if (code != TextTable.None)
        {
            return (ushort)code;
        }

        return (_bands is not null || _quantiles) && NumberParser.TryParse(utf8, out double value) ? Band(value) : Unlisted;
    }

    /// <summary>The code of a number in a numeric field: its band, or unlisted below the first one and where it is not finite.</summary>
    private ushort Band(double value)
    {
        if (_numbers is not null)
        {
            _numbers[_index] = value;
        }

        if (_bands is null)
        {
            return 0;
        }

        int below = 0;
        if (_bands.Length <= CountedBands)
        {
            // Counting takes no branch that random values would make the processor guess wrong.
            foreach (double cut in _bands)
            {
                below = unchecked(below + (value >= cut ? 1 : 0));
            }
        }
        else
        {
            int found = Array.BinarySearch(_bands, value);
            below = found >= 0 ? found + 1 : ~found;
        }

        return below == 0 ? Unlisted : (ushort)(below - 1);
    }

    private void Fill(CodedField field)
    {
        for (int code = 0; code < (field.Values?.Count ?? 0); code++)
        {
            _texts.Add(field.Values![code], code);
        }

        foreach (string text in field.Missing)
        {
            _texts.Add(text, field.MissingCode);
        }

        foreach (string text in field.Declined)
        {
            _texts.Add(text, field.DeclinedCode);
        }
    }
}
