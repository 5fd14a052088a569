using System.Text.Json;
using Evenhand.Circuits.Queries;
using Evenhand.Circuits.Structure;
using Evenhand.Testing;
using Xunit;

namespace Evenhand.Circuits.Tests.Queries;

/// <summary>Normal leaves: densities, intervals and moments, far out too.</summary>
public sealed class GaussianTests
{
    /// <summary>Case mixture-density-points: own construction, evaluated to fifty digits.</summary>
    [Fact]
    public void Mixture_AtPoints_HasTheLogDensitiesAndResponsibilitiesOfTheCase()
    {
        ReferenceCase given = ReferenceCases.Load("mixture").Single(c => c.Id == "mixture-density-points");
        double[] list(string key) => [.. given.Input.GetProperty(key).EnumerateArray().Select(x => x.GetDouble())];
        Circuit circuit = Mixture(list("lam"), list("mu"), list("sigma"), out int component);
        double[] x = list("x"), expected = [.. given.Expected.GetProperty("logpdf").EnumerateArray().Select(v => v.GetDouble())];
        for (int i = 0; i < x.Length; i++)
        {
            Factors evidence = Factors.None(circuit).With(0, Factor.At(x[i]));
            Assert.Equal(expected[i], CircuitQueries.Probability(circuit, evidence).Log, given.Tolerance.Absolute);
            Assert.Equal(1, CircuitQueries.Posteriors(circuit, evidence)[component]!.Sum(), 1e-12);
        }
    }

    /// <summary>Standard normal probabilities: NIST/SEMATECH e-Handbook, section 1.3.6.7.1, and Abramowitz and Stegun, table 26.1 and 26.2 (values from memory).</summary>
    [Theory]
    [InlineData(-1.959963984540054, 1.959963984540054, 0.95)]
    [InlineData(-1, 1, 0.682689492137086)]
    [InlineData(5, double.PositiveInfinity, 2.866515718791939e-7)]
    [InlineData(double.NegativeInfinity, -10, 7.619853024160527e-24)]
    public void Mass_OfAnInterval_IsTheTables(double low, double high, double expected) =>
        Assert.Equal(1, new Gaussian(0, 1).Mass(low, high) / expected, 1e-12);

    /// <summary>Against Simpson's rule with ten thousand steps.</summary>
    [Theory]
    [InlineData(0, 1, -0.5, 2)]
    [InlineData(3, 0.5, 3.2, 6)]
    [InlineData(-2, 2, -9, -4)]
    public void Moment_OnAnInterval_IsTheIntegral(double mean, double deviation, double low, double high)
    {
        Gaussian leaf = new(mean, deviation);
        for (int power = 0; power <= 2; power++)
        {
            const int steps = 10_000;
            double h = (high - low) / steps, sum = 0;
            for (int i = 0; i <= steps; i++)
            {
                double x = low + (i * h);
                sum += (i == 0 || i == steps ? 1 : i % 2 == 1 ? 4 : 2) * leaf.DensityAt(x) * Math.Pow(x - 0.7, power);
            }

            Assert.Equal(sum * h / 3, leaf.Moment(power, 0.7, low, high), 1e-10);
        }
    }

    /// <summary>KL of N(μ₁, σ₁²) from N(μ₂, σ₂²) = ln(σ₂/σ₁) + (σ₁² + (μ₁ − μ₂)²)/(2σ₂²) − ½; entropy ½ ln(2πeσ²): common practice, no source.</summary>
    [Fact]
    public void DivergenceAndEntropy_OfNormals_AreTheClosedForms()
    {
        Circuit leaf(double mean, double deviation)
        {
            CircuitBuilder builder = new([Variable.Continuous("x")]);
            return builder.Build(builder.AddGaussian(0, new Gaussian(mean, deviation)));
        }

        Assert.Equal(Math.Log(3 / 2.0) + ((4 + 1) / 18.0) - 0.5, Divergence.Of(leaf(1, 2), leaf(2, 3)), 1e-12);
        Assert.Equal(0.5 * Math.Log(2 * Math.PI * Math.E * 4), Entropy.OfAll(leaf(1, 2)), 1e-12);
    }

    /// <summary>Means and deviations of a mixture under an interval, against the mixture of the truncated parts.</summary>
    [Fact]
    public void Moments_OfAMixtureOnAnInterval_AreThoseOfItsParts()
    {
        Circuit circuit = Mixture([0.3, 0.7], [0, 3], [1, 0.5], out _);
        Factors evidence = Factors.None(circuit).With(0, Factor.Between(0.5, 3.5));
        (double mean, double deviation) = CircuitQueries.Moments(circuit, 0, evidence);
        Gaussian a = new(0, 1), b = new(3, 0.5);
        double whole = (0.3 * a.Mass(0.5, 3.5)) + (0.7 * b.Mass(0.5, 3.5));
        double expected = ((0.3 * a.Moment(1, 0, 0.5, 3.5)) + (0.7 * b.Moment(1, 0, 0.5, 3.5))) / whole;

        Assert.Equal(expected, mean, 1e-12);
        Assert.Equal(((0.3 * a.Moment(2, expected, 0.5, 3.5)) + (0.7 * b.Moment(2, expected, 0.5, 3.5))) / whole, deviation * deviation, 1e-12);
        Circuit given = Conditioning.On(circuit, evidence);
        Assert.Equal(mean, CircuitQueries.Moments(given, 0, Factors.None(given)).Mean, 1e-12);
    }

    /// <summary>
    /// Expectation maximisation for the waiting times of Old Faithful with equal variances, responsibilities from the circuit: T. Benaglia et al.,
    /// "mixtools", Journal of Statistical Software 32 (2009), section 2.
    /// </summary>
    [Fact]
    public void Responsibilities_InExpectationMaximisation_ReachThePublishedFit()
    {
        ReferenceCase given = ReferenceCases.Load("mixture").Single(c => c.Id == "em-faithful-equal-variance");
        string[][] rows = [.. File.ReadLines(TestData.Path("old_faithful.csv")).Select(l => l.Replace("\"", "", StringComparison.Ordinal).Split(','))];
        double[] x = [.. rows.Skip(1).Select(r => double.Parse(r[Array.IndexOf(rows[0], "waiting")], System.Globalization.CultureInfo.InvariantCulture))];
        (double[] weights, double[] means, double sigma, double log) = ([0.5, 0.5], [55, 80], 5, 0);
        for (int step = 0; step < 400; step++)
        {
            Circuit circuit = Mixture(weights, means, [sigma, sigma], out int component);
            double[][] responsibilities = [.. x.Select(v => CircuitQueries.Posteriors(circuit, Factors.None(circuit).With(0, Factor.At(v)))[component]!)];
            log = x.Sum(v => CircuitQueries.Probability(circuit, Factors.None(circuit).With(0, Factor.At(v))).Log);
            double[] counts = [.. Enumerable.Range(0, 2).Select(k => responsibilities.Sum(r => r[k]))];
            means = [.. Enumerable.Range(0, 2).Select(k => responsibilities.Select((r, i) => r[k] * x[i]).Sum() / counts[k])];
            sigma = Math.Sqrt(responsibilities.Select((r, i) => (r[0] * Math.Pow(x[i] - means[0], 2)) + (r[1] * Math.Pow(x[i] - means[1], 2))).Sum() / x.Length);
            weights = [.. counts.Select(c => c / x.Length)];
        }

        JsonElement expected = given.Expected;
        Assert.Equal(expected.GetProperty("lambda")[0].GetDouble(), weights[0], given.Tolerance.Absolute);
        Assert.Equal(expected.GetProperty("mu")[0].GetDouble(), means[0], given.Tolerance.Absolute * 10);
        Assert.Equal(expected.GetProperty("sigma")[0].GetDouble(), sigma, given.Tolerance.Absolute);
        Assert.Equal(expected.GetProperty("loglik").GetDouble(), log, 1e-5);
    }

    private static Circuit Mixture(double[] weights, double[] means, double[] deviations, out int component)
    {
        component = 1;
        CircuitBuilder builder = new([Variable.Continuous("x"), Variable.Category("component", weights.Select((_, i) => $"{i}"))]);
        int[] parts = [.. weights.Select((_, k) =>
        {
            double[] p = new double[weights.Length];
            p[k] = 1;
            return builder.AddProduct([builder.AddGaussian(0, new Gaussian(means[k], deviations[k])), builder.AddDiscrete(1, p)]);
        })];
        return builder.Build(builder.AddSum(parts, weights));
    }
}
