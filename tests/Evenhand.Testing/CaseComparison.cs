using System.Globalization;
using System.Text.Json;

namespace Evenhand.Testing;

/// <summary>Compares computed values with those a case expects; counts them and gathers every difference with its source.</summary>
public sealed class CaseComparison
{
    private readonly List<string> _differences = [];
    private readonly SortedDictionary<string, int> _comparedByCase = new(StringComparer.Ordinal);

    /// <summary>Values compared so far.</summary>
    public int Compared { get; private set; }

    /// <summary>Values compared so far by the case's name.</summary>
    public IReadOnlyDictionary<string, int> ComparedByCase => _comparedByCase;

    /// <summary>The differences, one a line; empty when all agree.</summary>
    public string Differences => string.Join(Environment.NewLine, _differences);

    /// <summary>Compares a number the case expects under this name; does nothing when the case lacks it.</summary>
    public void Number(ReferenceCase @case, string name, double got)
    {
        if (@case.TryExpected(name, out JsonElement expected))
        {
            Check(@case, name, got, expected.GetDouble(), @case.Tolerance.Accepts);
        }
    }

    /// <summary>Compares a p-value, by its relative tolerance where the case has one.</summary>
    public void Tail(ReferenceCase @case, string name, double got)
    {
        if (@case.TryExpected(name, out JsonElement expected))
        {
            Check(@case, name, got, expected.GetDouble(), @case.Tolerance.AcceptsTail);
        }
    }

    /// <summary>Compares the two ends of an interval the case expects under this name; does nothing when the case lacks it.</summary>
    public void Ends(ReferenceCase @case, string name, double low, double high)
    {
        if (@case.TryExpected(name, out JsonElement expected))
        {
            Check(@case, name + ".low", low, expected[0].GetDouble(), @case.Tolerance.Accepts);
            Check(@case, name + ".high", high, expected[1].GetDouble(), @case.Tolerance.Accepts);
        }
    }

    /// <summary>Compares one value with one expected value.</summary>
    public void Value(ReferenceCase @case, string name, double got, double expected) =>
        Check(@case, name, got, expected, @case.Tolerance.Accepts);

    private void Check(ReferenceCase @case, string name, double got, double expected, Func<double, double, bool> accepts)
    {
        Compared++;
        _comparedByCase[@case.Id] = _comparedByCase.GetValueOrDefault(@case.Id) + 1;
        if (!accepts(got, expected))
        {
            _differences.Add(string.Create(CultureInfo.InvariantCulture, $"{@case.Id} {name}: got {got:R}, expected {expected:R}. Source: {@case.Source}"));
        }
    }
}
