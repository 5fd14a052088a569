using Evenhand.Circuits.Learning;
using Evenhand.Circuits.Structure;
using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Records;

namespace Evenhand.Monitoring.Population;

/// <summary>A training sample in the making: the codes of accepted records, column by column, and the numbers behind bands.</summary>
/// <remarks>
/// Records with an <c>other</c> decision, and those with an unlisted or declined label of any group, are left out and counted: a
/// circuit is over listed groups and decisions. An input that is unlisted or declined is missing to the circuit.
/// </remarks>
public sealed class PopulationSample
{
    /// <summary>The name of the decision's variable, unless a field has it.</summary>
    public const string DecisionName = "decision";

    private readonly Charter _charter;
    private readonly RecordLayout _layout;
    private readonly List<ushort>[] _codes;
    private readonly List<double>?[] _numbers;
    private readonly List<ushort> _decisions = [];

    /// <summary>An empty sample.</summary>
    /// <param name="charter">The charter; its decision may be absent.</param>
    /// <param name="layout">Its layout, collecting numbers.</param>
    public PopulationSample(Charter charter, RecordLayout layout)
    {
        ArgumentNullException.ThrowIfNull(charter);
        ArgumentNullException.ThrowIfNull(layout);
        _charter = charter;
        _layout = layout;
        _codes = [.. layout.Fields.Select(_ => new List<ushort>())];
        _numbers = [.. layout.Fields.Select(f => f.IsNumeric ? new List<double>() : null)];
    }

    /// <summary>Entries read.</summary>
    public long Read { get; private set; }

    /// <summary>Records taken.</summary>
    public int Records => _codes.Length == 0 ? 0 : _codes[0].Count;

    /// <summary>Entries rejected by the decoder.</summary>
    public long Rejected { get; private set; }

    /// <summary>Records left out for an <c>other</c> decision.</summary>
    public long Other { get; private set; }

    /// <summary>Records left out for an unlisted or declined label.</summary>
    public long Unlisted { get; private set; }

    /// <summary>Takes the one record of a batch.</summary>
    /// <param name="batch">A batch of at most one entry, decoded with the layout of this sample.</param>
    public void Add(RecordBatch batch)
    {
        ArgumentNullException.ThrowIfNull(batch);
        ArgumentOutOfRangeException.ThrowIfGreaterThan(batch.Count, 1, nameof(batch));
        if (batch.Count == 0)
        {
            return;
        }

        Read++;
        ReadOnlySpan<ushort> codes = batch.CodesOf(0);
        if (batch.Rejected[0] != RejectReason.None)
        {
            Rejected++;
        }
        else if (_charter.Decision is not null && batch.Decisions[0] == DecisionCode.Other)
        {
            Other++;
        }
        else if (HasUnlistedLabel(codes))
        {
            Unlisted++;
        }
        else
        {
            Take(batch, codes);
        }

        _layout.Numbers?.Reset();
    }

    /// <summary>The charter with quantile inputs cut at the sample's quantiles.</summary>
    public Charter Cut() => _charter with
    {
        Inputs = [.. _charter.Inputs.Select((input, i) => input.Quantiles is { } q && input.Bands is null
            ? QuantileCuts.Cut(input, QuantileCuts.Of(_numbers[_layout.Groups + i]!, q))
            : input)],
    };

    /// <summary>The sample as a table of a charter's fields.</summary>
    /// <param name="cut">What <see cref="Cut"/> gave, of this sample or of the one that is learned from.</param>
    /// <param name="centres">Whose numbers the bins are centred by; null for this sample's.</param>
    public TrainingTable Table(Charter cut, PopulationSample? centres = null)
    {
        ArgumentNullException.ThrowIfNull(cut);
        CodedField[] fields = [.. cut.Groups, .. cut.Inputs];
        ushort[][] columns = [.. fields.Select((field, f) => Column(field, f))];
        Variable[] variables = [.. fields.Select((field, f) => VariableOf(field, (centres ?? this)._numbers[f]))];
        int groups = _layout.Groups;
        Variable? decision = _charter.Decision is null ? null : Variable.Category(NameOfDecision(fields), ["unfavourable", "favourable"]);
        return new TrainingTable(variables[..groups], decision, variables[groups..], columns[..groups], [.. _decisions], columns[groups..]);
    }

    /// <summary>The share of missing, unlisted and declined values of each field, by name.</summary>
    public IReadOnlyList<KeyValuePair<string, double>> MissingShares() =>
        [.. _layout.Fields.Select((field, f) => KeyValuePair.Create(field.Name, Records == 0 ? 0 : (double)_codes[f].Count(c => c >= field.ListedCount) / Records))];

    private static string NameOfDecision(CodedField[] fields) => fields.Any(f => f.Name == DecisionName) ? $"({DecisionName})" : DecisionName;

    private bool HasUnlistedLabel(ReadOnlySpan<ushort> codes)
    {
        for (int g = 0; g < _layout.Groups; g++)
        {
            if (codes[g] > _layout.Fields[g].MissingCode)
            {
                return true;
            }
        }

        return false;
    }

    private void Take(RecordBatch batch, ReadOnlySpan<ushort> codes)
    {
        _decisions.Add((ushort)batch.Decisions[0]);
        for (int f = 0; f < codes.Length; f++)
        {
            _codes[f].Add(codes[f]);
            _numbers[f]?.Add(codes[f] < _layout.Fields[f].ListedCount ? _layout.Numbers![f] : double.NaN);
        }
    }

    /// <summary>The codes of a column; whatever is not listed is missing.</summary>
    private ushort[] Column(CodedField field, int index)
    {
        if (_layout.Fields[index].Bands is null && field.Bands is { } cuts)
        {
            return [.. _numbers[index]!.Select(v => double.IsNaN(v) ? (ushort)cuts.Count : (ushort)(cuts.Count(c => v >= c) - 1))];
        }

        return [.. _codes[index].Select(c => (ushort)Math.Min(c, field.ListedCount))];
    }

    private static Variable VariableOf(CodedField field, List<double>? numbers)
    {
        if (field.Bands is null)
        {
            return Variable.Category(field.Name, field.Values!);
        }

        double[] edges = [.. field.Bands, double.PositiveInfinity];
        double[] sums = new double[field.Bands.Count], counts = new double[field.Bands.Count];
        foreach (double v in numbers!.Where(v => v >= edges[0]))
        {
            int bin = field.Bands.Count(c => v >= c) - 1;
            sums[bin] += v;
            counts[bin]++;
        }

        return Variable.Binned(field.Name, edges, sums.Select((s, b) => counts[b] > 0 ? s / counts[b] : double.NaN));
    }
}
