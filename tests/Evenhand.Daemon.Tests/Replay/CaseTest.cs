using System.Text.Json;
using Evenhand.Testing;
using Xunit.Abstractions;

namespace Evenhand.Daemon.Tests.Replay;

/// <summary>Common to tests that hold replays against tests/data/cases/public_cases.json; each difference cites the case's source.</summary>
public abstract class CaseTest(ITestOutputHelper output)
{
    /// <summary>Numbers of a two-group case of a dataset that a replay reproduces.</summary>
    private protected const int Crude = 22;

    /// <summary>Numbers of a stratified case that a replay reproduces.</summary>
    private protected const int Adjusted = 10;

    private protected CaseComparison Comparison { get; } = new();

    private protected static ReferenceCase Case(string topic, string id) => ReferenceCases.Load(topic).Single(c => c.Id == id);

    /// <summary>Compares a number nested in the case's expected values.</summary>
    private protected void Compare(ReferenceCase c, double got, params string[] path)
    {
        JsonElement expected = path.Aggregate(c.Expected, (node, key) => node.GetProperty(key));
        Comparison.Value(c, string.Join('.', path), got, expected.GetDouble());
    }

    /// <summary>Compares two ends nested in the case's expected values.</summary>
    private protected void CompareEnds(ReferenceCase c, double low, double high, params string[] path)
    {
        JsonElement expected = path.Aggregate(c.Expected, (node, key) => node.GetProperty(key));
        Comparison.Value(c, string.Join('.', path) + ".low", low, expected[0].GetDouble());
        Comparison.Value(c, string.Join('.', path) + ".high", high, expected[1].GetDouble());
    }

    /// <summary>Holds the number of values compared and that none differs.</summary>
    private protected void AssertAgreement(int compared)
    {
        foreach ((string id, int numbers) in Comparison.ComparedByCase)
        {
            output.WriteLine($"{id}: {numbers} numbers compared");
        }

        Assert.True(Comparison.Differences.Length == 0, Comparison.Differences);
        Assert.Equal(compared, Comparison.Compared);
    }
}
