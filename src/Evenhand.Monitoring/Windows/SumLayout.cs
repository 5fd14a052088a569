using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Records;

namespace Evenhand.Monitoring.Windows;

/// <summary>The layout of a bucket's sums: one array of 64-bit integers, cut into sections as the charter asks.</summary>
/// <remarks>
/// <para>The format is described in <c>bucket-format.md</c>. All sums are integers, so that adding them in any order gives the same bits.</para>
/// <para>A later section is appended after the last one; nothing before it moves.</para>
/// </remarks>
public sealed class SumLayout
{
    /// <summary>Counts a cell: unfavourable and favourable by outcome unknown, positive, negative; then other decisions.</summary>
    public const int CountWidth = 7;

    /// <summary>
    /// Score sums a cell: for each outcome a count, the sum and the sum of squares of the scores, each sum in two parts
    /// (the lower 20 bits and the rest) so that integers never overflow and buckets add up part by part.
    /// </summary>
    public const int ScoreWidth = 15;

    /// <summary>Most integers in one bucket: 32 MiB.</summary>
    public const int MaximumLength = 1 << 22;

    private readonly int[] _adjust;
    private readonly int[] _adjustStrides;

    /// <summary>Lays out the sums of a charter.</summary>
    /// <exception cref="ArgumentException">The charter asks for more than <see cref="MaximumLength"/> sums.</exception>
    public SumLayout(Charter charter)
    {
        ArgumentNullException.ThrowIfNull(charter);
        Charter = charter;
        Records = new RecordLayout(charter);
        AbsenceFields = [.. Records.Fields.Select(f => f.Name), .. Records.HasScore ? [ScoreField.FieldName] : Array.Empty<string>()];
        (_adjust, _adjustStrides, Strata) = LayOutStrata(charter, Records);
        List<GroupingShape> shapes = [];
        long length = 0;
        foreach ((string? name, IReadOnlyList<int> groups) in Wanted(charter))
        {
            shapes.Add(Place(name, groups, ref length));
        }

        if (length > MaximumLength)
        {
            throw new ArgumentException(
                $"charter {charter.Id}: {length:N0} sums a bucket, at most {MaximumLength:N0}; take fewer intersections, adjust fields or listed values",
                nameof(charter));
        }

        Groupings = shapes;
        Length = (int)length;
    }

    /// <summary>The charter.</summary>
    public Charter Charter { get; }

    /// <summary>The records' layout.</summary>
    public RecordLayout Records { get; }

    /// <summary>Everyone, then the charter's groupings.</summary>
    public IReadOnlyList<GroupingShape> Groupings { get; }

    /// <summary>The fields whose absences are counted: the coded fields, then the score.</summary>
    public IReadOnlyList<string> AbsenceFields { get; }

    /// <summary>Number of strata of adjusted measures; 0 where nothing is adjusted for.</summary>
    public int Strata { get; }

    /// <summary>Integers in a bucket.</summary>
    public int Length { get; }

    /// <summary>The stratum of a record, or −1 where one of the adjust fields is not listed.</summary>
    public int StratumOf(ReadOnlySpan<ushort> codes)
    {
        int stratum = 0;
        for (int i = 0; i < _adjust.Length; i++)
        {
            int code = codes[_adjust[i]];
            if (code >= Records.Fields[_adjust[i]].ListedCount)
            {
                return -1;
            }

            stratum += code * _adjustStrides[i];
        }

        return stratum;
    }

    /// <summary>The labels of a stratum, one for each adjust field.</summary>
    public string[] StratumLabels(int stratum)
    {
        string[] labels = new string[_adjust.Length];
        for (int i = 0; i < labels.Length; i++)
        {
            CodedField field = Records.Fields[_adjust[i]];
            labels[i] = field.Label(stratum / _adjustStrides[i] % field.ListedCount);
        }

        return labels;
    }

    private static IEnumerable<(string? Name, IReadOnlyList<int> Groups)> Wanted(Charter charter) =>
        charter.Groupings.Select(g => ((string?)g.Name, g.Groups)).Prepend((null, []));

    private static (int[] Fields, int[] Strides, int Strata) LayOutStrata(Charter charter, RecordLayout records)
    {
        int[] fields = [.. charter.Adjust.Select(a => IndexOf(records, a.Field))];
        int[] strides = new int[fields.Length];
        long strata = 1;
        for (int i = fields.Length - 1; i >= 0; i--)
        {
            strides[i] = (int)strata;
            strata *= records.Fields[fields[i]].ListedCount;
            if (strata > MaximumLength)
            {
                throw new ArgumentException(
                    $"charter {charter.Id}: adjust crosses into more than {MaximumLength:N0} strata; take fewer fields or wider bands", nameof(charter));
            }
        }

        return (fields, strides, fields.Length == 0 ? 0 : (int)strata);
    }

    private static int IndexOf(RecordLayout records, string field)
    {
        for (int i = 0; i < records.Fields.Count; i++)
        {
            if (records.Fields[i].Name == field)
            {
                return i;
            }
        }

        throw new ArgumentException($"adjust names {field}, which is neither a group nor an input", nameof(field));
    }

    private GroupingShape Place(string? name, IReadOnlyList<int> groups, ref long length)
    {
        long cells = groups.Aggregate(1L, (product, g) => product * Records.Fields[g].CodeCount);
        long counts = length;
        long scores = counts + (cells * CountWidth);
        long absences = scores + (Records.HasScore ? cells * ScoreWidth : 0);
        long strata = absences + (cells * AbsenceFields.Count * 2);
        bool adjusted = Strata > 0 && name is not null;
        length = strata + (adjusted ? cells * Strata * 2 : 0);
        if (length > int.MaxValue)
        {
            throw new ArgumentException($"charter {Charter.Id}: grouping {name} crosses into too many cells; take fewer intersections", nameof(groups));
        }

        return new GroupingShape(name, groups, Records.Fields)
        {
            CountsAt = (int)counts,
            ScoresAt = Records.HasScore ? (int)scores : -1,
            AbsencesAt = (int)absences,
            StrataAt = adjusted ? (int)strata : -1,
        };
    }
}
