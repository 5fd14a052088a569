namespace Evenhand.Statistics.HypothesisTests;

/// <summary>Outcome of a z test of two proportions.</summary>
/// <param name="Z">Standard deviations between the proportions, first minus second; NaN when undefined.</param>
/// <param name="P">Two-sided p-value; NaN when undefined.</param>
public readonly record struct TwoProportionZ(double Z, double P);
