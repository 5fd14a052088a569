using Evenhand.Statistics.Distributions;
using Evenhand.Statistics.Intervals;

namespace Evenhand.Statistics.HypothesisTests;

/// <summary>
/// Comparison of two groups over strata of two-by-two tables (Mantel and Haenszel, Statistical aspects of the analysis
/// of data from retrospective studies of disease, Journal of the National Cancer Institute 22, 1959).
/// </summary>
/// <remarks>
/// Every method takes the strata flattened: four counts each, in the order events and non-events of the first group,
/// events and non-events of the second. A stratum in which one group is empty compares nothing and adds nothing; one
/// without events, or without non-events, adds nothing to odds ratios and tests, but counts as a difference of zero
/// in the risk difference.
/// </remarks>
public static partial class MantelHaenszel
{
    /// <summary>
    /// The common odds ratio with the interval of Robins, Breslow and Greenland (Estimators of the Mantel-Haenszel
    /// variance consistent in both sparse data and large-strata limiting models, Biometrics 42, 1986).
    /// </summary>
    /// <param name="strata">The strata, four counts each.</param>
    /// <param name="level">Confidence level, strictly between 0 and 1.</param>
    /// <returns>
    /// With R = Σ a d/N and S = Σ b c/N the estimate is R/S: 0 when only R is zero, +∞ when only S is, NaN when both
    /// are; in these three cases the ends are NaN.
    /// </returns>
    /// <exception cref="ArgumentException">The length is not a multiple of four.</exception>
    /// <exception cref="ArgumentOutOfRangeException">A count is negative, or the level is not inside (0, 1).</exception>
    public static Estimate OddsRatio(ReadOnlySpan<long> strata, double level)
    {
        int count = Stratum.CountIn(strata);
        double z = Quantiles.TwoSidedNormal(level);
        double sumR = 0, sumS = 0, sumPr = 0, sumCross = 0, sumQs = 0;
        for (int i = 0; i < count; i++)
        {
            Stratum s = Stratum.At(strata, i);
            if (s.Total == 0)
            {
                continue;
            }

            double r = s.A * s.D / s.Total;
            double t = s.B * s.C / s.Total;
            double p = (s.A + s.D) / s.Total;
            double q = (s.B + s.C) / s.Total;
            sumR += r;
            sumS += t;
            sumPr += p * r;
            sumCross += (p * t) + (q * r);
            sumQs += q * t;
        }

        double ratio = sumR / sumS;
        if (sumR == 0 || sumS == 0)
        {
            return new Estimate(ratio, Interval.Undefined);
        }

        double variance = (sumPr / (2 * sumR * sumR)) + (sumCross / (2 * sumR * sumS)) + (sumQs / (2 * sumS * sumS));
        double factor = Math.Exp(z * Math.Sqrt(variance));
        return new Estimate(ratio, new Interval(ratio / factor, ratio * factor));
    }

    /// <summary>
    /// The common risk difference, first group minus second, weighted as Mantel and Haenszel do, with the interval of
    /// Sato (On the variance estimator for the Mantel-Haenszel risk difference, Biometrics 45, 1989).
    /// </summary>
    /// <param name="strata">The strata, four counts each.</param>
    /// <param name="level">Confidence level, strictly between 0 and 1.</param>
    /// <returns>NaN throughout when no stratum has members of both groups. The ends are not cut to [−1, 1].</returns>
    /// <exception cref="ArgumentException">The length is not a multiple of four.</exception>
    /// <exception cref="ArgumentOutOfRangeException">A count is negative, or the level is not inside (0, 1).</exception>
    public static Estimate RiskDifference(ReadOnlySpan<long> strata, double level)
    {
        int count = Stratum.CountIn(strata);
        double z = Quantiles.TwoSidedNormal(level);
        double weight = 0, difference = 0, slope = 0, constant = 0;
        for (int i = 0; i < count; i++)
        {
            Stratum s = Stratum.At(strata, i);
            if (s.First == 0 || s.Second == 0)
            {
                continue;
            }

            double share1 = s.First / s.Total;
            double share2 = s.Second / s.Total;
            weight += s.First * share2;
            difference += (s.A * share2) - (s.C * share1);
            slope += (s.C * share1 * share1) - (s.A * share2 * share2) + (share1 * share2 * (s.Second - s.First) / 2);
            constant += ((s.A * s.D) + (s.C * s.B)) / (2 * s.Total);
        }

        if (weight == 0)
        {
            return Estimate.Undefined;
        }

        double value = difference / weight;
        double reach = z * Math.Sqrt(Math.Max(0, (value * slope) + constant)) / weight;
        return new Estimate(value, new Interval(value - reach, value + reach));
    }
}
