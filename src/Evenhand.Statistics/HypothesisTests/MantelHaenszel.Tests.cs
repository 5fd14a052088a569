namespace Evenhand.Statistics.HypothesisTests;

/// <content>The chi-square tests: of no association, and of one odds ratio common to the strata.</content>
public static partial class MantelHaenszel
{
    /// <summary>
    /// The Cochran–Mantel–Haenszel test of no association within the strata, one degree of freedom (Mantel and
    /// Haenszel, 1959).
    /// </summary>
    /// <param name="strata">The strata, four counts each.</param>
    /// <param name="continuityCorrection">Whether the distance of events from their expectation is cut by one half, down to zero.</param>
    /// <returns>NaN without degrees of freedom when no stratum is informative.</returns>
    /// <exception cref="ArgumentException">The length is not a multiple of four.</exception>
    /// <exception cref="ArgumentOutOfRangeException">A count is negative.</exception>
    public static ChiSquareResult Test(ReadOnlySpan<long> strata, bool continuityCorrection = false)
    {
        int count = Stratum.CountIn(strata);
        double excess = 0, variance = 0;
        for (int i = 0; i < count; i++)
        {
            Stratum s = Stratum.At(strata, i);
            if (!s.IsInformative)
            {
                continue;
            }

            excess += ((s.A * s.D) - (s.B * s.C)) / s.Total;
            variance += s.First / s.Total * (s.Second / s.Total) * s.Events * (s.NonEvents / (s.Total - 1));
        }

        double distance = Math.Max(0, Math.Abs(excess) - (continuityCorrection ? 0.5 : 0));
        return ChiSquareResult.Of(distance * distance / variance, variance > 0 ? 1 : 0);
    }

    /// <summary>
    /// The test that the strata share one odds ratio, about the Mantel–Haenszel estimate (Breslow and Day, Statistical
    /// Methods in Cancer Research, volume 1, 1980, section 4.4), without Tarone's correction.
    /// </summary>
    /// <param name="strata">The strata, four counts each.</param>
    /// <returns>
    /// Degrees of freedom: informative strata less one. NaN when fewer than two are informative or when the common odds
    /// ratio is 0, infinite or undefined.
    /// </returns>
    /// <exception cref="ArgumentException">The length is not a multiple of four.</exception>
    /// <exception cref="ArgumentOutOfRangeException">A count is negative.</exception>
    public static ChiSquareResult BreslowDay(ReadOnlySpan<long> strata) => Homogeneity(strata, tarone: false);

    /// <summary>
    /// The Breslow–Day test with the correction that makes it a proper score test (Tarone, On heterogeneity tests based
    /// on efficient scores, Biometrika 72, 1985).
    /// </summary>
    /// <param name="strata">The strata, four counts each.</param>
    /// <returns>As <see cref="BreslowDay"/>; the statistic is never larger.</returns>
    /// <exception cref="ArgumentException">The length is not a multiple of four.</exception>
    /// <exception cref="ArgumentOutOfRangeException">A count is negative.</exception>
    public static ChiSquareResult Tarone(ReadOnlySpan<long> strata) => Homogeneity(strata, tarone: true);

    private static ChiSquareResult Homogeneity(ReadOnlySpan<long> strata, bool tarone)
    {
        int count = Stratum.CountIn(strata);
        double ratio = OddsRatio(strata, 0.95).Value;
        if (!(ratio > 0 && double.IsFinite(ratio)))
        {
            return ChiSquareResult.Of(double.NaN, 0);
        }

        // Turned so that the odds ratio is at most 1 and the first cell the smaller of its diagonal: the small fitted
        // counts then come out directly and not as differences of large ones. No statistic depends on the turn.
        bool exchange = ratio > 1;
        double atMostOne = exchange ? 1 / ratio : ratio;
        int informative = 0;
        double statistic = 0, excess = 0, variance = 0;
        for (int i = 0; i < count; i++)
        {
            Stratum s = Stratum.At(strata, i);
            if (!s.IsInformative)
            {
                continue;
            }

            s = exchange ? s.Exchanged : s;
            s = s.A > s.D ? s.Turned : s;
            double fitted = s.FittedEvents(atMostOne);
            double cells = (1 / fitted) + (1 / (s.First - fitted)) + (1 / (s.Events - fitted)) + (1 / (s.D - s.A + fitted));
            informative++;
            statistic += (s.A - fitted) * (s.A - fitted) * cells;
            excess += s.A - fitted;
            variance += 1 / cells;
        }

        double correction = tarone ? excess * excess / variance : 0;
        return ChiSquareResult.Of(statistic - correction, informative - 1);
    }
}
