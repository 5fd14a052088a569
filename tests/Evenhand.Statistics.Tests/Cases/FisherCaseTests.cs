using System.Globalization;
using System.Numerics;
using System.Text.Json;
using Evenhand.Statistics.HypothesisTests;
using Evenhand.Testing;

namespace Evenhand.Statistics.Tests.Cases;

/// <summary>Fisher's exact test against tests/data/cases/public_cases.json, decimals and fractions.</summary>
public sealed class FisherCaseTests
{
    private readonly CaseComparison _comparison = new();

    [Fact]
    public void TwoSided_ReferenceCases_Agree()
    {
        foreach (ReferenceCase c in ReferenceCases.Load("fisher_exact"))
        {
            JsonElement table = c.Input.GetProperty("table");
            double p = FisherExact.TwoSided(table[0][0].GetInt64(), table[0][1].GetInt64(), table[1][0].GetInt64(), table[1][1].GetInt64());
            _comparison.Number(c, "two_sided", p);
            _comparison.Number(c, "p_two_sided", p);
            if (c.TryExpected("fractions", out JsonElement fractions))
            {
                _comparison.Value(c, "fractions.two_sided", p, Quotient(fractions.GetProperty("two_sided").GetString()!));
            }
        }

        Assert.True(_comparison.Differences.Length == 0, _comparison.Differences);
        Assert.Equal(5 + 4, _comparison.Compared);
    }

    private static double Quotient(string fraction)
    {
        BigInteger[] parts = [.. fraction.Split('/').Select(part => BigInteger.Parse(part, CultureInfo.InvariantCulture))];
        return parts.Length == 1 ? (double)parts[0] : (double)parts[0] / (double)parts[1];
    }
}
