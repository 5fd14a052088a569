using Evenhand.Statistics.Distributions;

namespace Evenhand.Statistics.HypothesisTests;

/// <summary>Outcome of a test whose statistic is referred to a chi-square distribution.</summary>
/// <param name="Statistic">The statistic; NaN when undefined.</param>
/// <param name="DegreesOfFreedom">Degrees of freedom; 0 when the data leave nothing to test.</param>
/// <param name="P">P-value; NaN when undefined or without degrees of freedom.</param>
public readonly record struct ChiSquareResult(double Statistic, int DegreesOfFreedom, double P)
{
    /// <summary>The result for a statistic, with its p-value worked out.</summary>
    internal static ChiSquareResult Of(double statistic, int degreesOfFreedom) =>
        degreesOfFreedom < 1
            ? new ChiSquareResult(double.NaN, 0, double.NaN)
            : new ChiSquareResult(statistic, degreesOfFreedom, Tails.ChiSquareTail(statistic, degreesOfFreedom));
}
