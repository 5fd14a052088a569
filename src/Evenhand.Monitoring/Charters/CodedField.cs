using System.Globalization;

namespace Evenhand.Monitoring.Charters;

/// <summary>A field of a record that is kept as a small code: a group, an input.</summary>
/// <remarks>
/// Codes 0 to <see cref="ListedCount"/> − 1 are the listed values or bands in charter order.
/// Three more follow, never mixed up: <see cref="MissingCode"/> (absent, null, empty or listed under <c>missing</c>),
/// <see cref="UnlistedCode"/> (a value the charter does not list, or below the first band) and
/// <see cref="DeclinedCode"/> (listed under <c>declined</c>).
/// </remarks>
public record CodedField
{
    /// <summary>The field's name; unique among groups and inputs.</summary>
    public required string Name { get; init; }

    /// <summary>Where the value stands.</summary>
    public required FieldPath At { get; init; }

    /// <summary>The listed values as text, or null where the field is banded.</summary>
    public IReadOnlyList<string>? Values { get; init; }

    /// <summary>Strictly increasing lower cuts; a band runs to the next cut and the last is open. Null where the field lists values.</summary>
    public IReadOnlyList<double>? Bands { get; init; }

    /// <summary>Number of equally frequent bands to cut from a training sample; null unless asked for. Cut points are not known to the charter itself.</summary>
    public int? Quantiles { get; init; }

    /// <summary>Texts that mean missing, beside absent, null and the empty string.</summary>
    public IReadOnlyList<string> Missing { get; init; } = [];

    /// <summary>Texts by which the person declined to say.</summary>
    public IReadOnlyList<string> Declined { get; init; } = [];

    /// <summary>Whether values are numbers sorted into bands.</summary>
    public bool IsNumeric => Bands is not null || Quantiles is not null;

    /// <summary>Number of listed codes; a quantile field without cut points counts as one code, "present".</summary>
    public int ListedCount => Values?.Count ?? Bands?.Count ?? 1;

    /// <summary>The code of a missing value.</summary>
    public int MissingCode => ListedCount;

    /// <summary>The code of a value that the charter does not list.</summary>
    public int UnlistedCode => ListedCount + 1;

    /// <summary>The code of a value by which the person declined to say.</summary>
    public int DeclinedCode => ListedCount + 2;

    /// <summary>Number of codes altogether: the listed ones and the three special ones.</summary>
    public int CodeCount => ListedCount + 3;

    /// <summary>The text of a code: a listed value, a band written <c>18..30</c> or <c>75..</c>, or <c>(missing)</c>, <c>(unlisted)</c>, <c>(declined)</c>.</summary>
    /// <exception cref="ArgumentOutOfRangeException">The code is none of this field's.</exception>
    public string Label(int code)
    {
        ArgumentOutOfRangeException.ThrowIfNegative(code);
        ArgumentOutOfRangeException.ThrowIfGreaterThanOrEqual(code, CodeCount);
        if (code == MissingCode)
        {
            return "(missing)";
        }

        if (code == UnlistedCode)
        {
            return "(unlisted)";
        }

        if (code == DeclinedCode)
        {
            return "(declined)";
        }

        return Values is not null ? Values[code] : Bands is not null ? BandLabel(code) : "(present)";
    }

    private string BandLabel(int band)
    {
        string low = Cut(Bands![band]);
        return band + 1 < Bands.Count ? $"{low}..{Cut(Bands[band + 1])}" : $"{low}..";
    }

    private static string Cut(double value) => double.IsInfinity(value) ? "" : value.ToString("R", CultureInfo.InvariantCulture);
}
