namespace Evenhand.Monitoring.Measures;

/// <summary>One measured number with its interval: the currency of the store, snapshots, metrics and screens.</summary>
/// <remarks>A property that is null does not apply, apart from <see cref="Value"/>, <see cref="Low"/> and <see cref="High"/>: there NaN means undefined and infinity means unbounded, both published as null with a <see cref="Note"/>.</remarks>
public sealed class Reading
{
    /// <summary>The window: the charter's text, or <c>all</c>.</summary>
    public required string Window { get; init; }

    /// <summary>The slice, such as <c>version=3.2</c>; null for all together.</summary>
    public string? Slice { get; init; }

    /// <summary>The measure, one of <see cref="MeasureNames"/>.</summary>
    public required string Measure { get; init; }

    /// <summary>What it rests on, one of <see cref="BasisNames"/>.</summary>
    public string Basis { get; init; } = BasisNames.Observed;

    /// <summary>The grouping; null for everyone.</summary>
    public string? Grouping { get; init; }

    /// <summary>The group's label; null for everyone.</summary>
    public string? Group { get; init; }

    /// <summary>The label by group field; null for everyone and for <c>(unlisted)</c>, <c>(declined)</c>.</summary>
    public IReadOnlyList<KeyValuePair<string, string>>? Cell { get; init; }

    /// <summary>The label of the group compared with; null where nothing is compared.</summary>
    public string? Reference { get; init; }

    /// <summary>The field of a missing or unlisted rate.</summary>
    public string? Field { get; init; }

    /// <summary>The number; null where the measure is an interval only.</summary>
    public double? Value { get; set; }

    /// <summary>The lower end; null where the measure has no interval.</summary>
    public double? Low { get; set; }

    /// <summary>The upper end; null where the measure has no interval.</summary>
    public double? High { get; set; }

    /// <summary>The lower end by which rules judge, where it differs from <see cref="Low"/>.</summary>
    public double? JudgedLow { get; set; }

    /// <summary>The upper end by which rules judge, where it differs from <see cref="High"/>.</summary>
    public double? JudgedHigh { get; set; }

    /// <summary>Confidence level of the interval; null where there is none.</summary>
    public double? Level { get; set; }

    /// <summary>The denominator: records that the number rests on.</summary>
    public long? Count { get; set; }

    /// <summary>Favourable decisions among them.</summary>
    public long? Favourable { get; set; }

    /// <summary>Share of decided records whose labels of the grouping are all listed.</summary>
    public double? KnownShare { get; set; }

    /// <summary>Two-sided p-value.</summary>
    public double? PValue { get; set; }

    /// <summary>p-value of the Breslow–Day test that the odds ratio is the same in every stratum.</summary>
    public double? HomogeneityP { get; set; }

    /// <summary>How the interval was computed.</summary>
    public string? Method { get; set; }

    /// <summary>What a rule says of it; null where none judges it.</summary>
    public string? State { get; set; }

    /// <summary>What a reader has to know beside the number.</summary>
    public string? Note { get; set; }

    /// <summary>Whether the number is withheld because too few people stand behind it.</summary>
    public bool Suppressed { get; set; }

    /// <summary>Smallest denominator on either side of a comparison; the publication rule looks at it.</summary>
    internal long SmallestCount { get; set; } = long.MaxValue;

    /// <summary>The cell in the grouping's shape.</summary>
    internal int CellIndex { get; init; } = -1;

    /// <summary>The cell compared with; −1 where nothing is compared.</summary>
    internal int ReferenceIndex { get; init; } = -1;

    /// <summary>Adds a note to those there are.</summary>
    public void AddNote(string note) => Note = Note is null ? note : $"{Note}; {note}";

    /// <summary>Takes every number away.</summary>
    public void Suppress()
    {
        Suppressed = true;
        Value = Low = High = JudgedLow = JudgedHigh = Level = KnownShare = PValue = HomogeneityP = null;
        Count = Favourable = null;
        Note = "too few people to publish";
    }
}
