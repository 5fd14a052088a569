using Evenhand.Monitoring.Charters;

namespace Evenhand.Monitoring.Population;

/// <summary>Cuts numbers into equally frequent bands.</summary>
public static class QuantileCuts
{
    /// <summary>The lower cuts of the bands, the first −∞; fewer bands than asked for where values repeat.</summary>
    /// <param name="values">The numbers; NaN counts as none.</param>
    /// <param name="bands">Bands asked for, at least 2.</param>
    /// <remarks>A cut is the smallest value that at least the band's share of the numbers lies below; half of a tie never falls apart.</remarks>
    public static double[] Of(IEnumerable<double> values, int bands)
    {
        double[] sorted = [.. values.Where(v => !double.IsNaN(v)).Order()];
        List<double> cuts = [double.NegativeInfinity];
        for (int band = 1; band < bands && sorted.Length > 0; band++)
        {
            double cut = sorted[(int)((long)sorted.Length * band / bands)];
            if (cut > cuts[^1] && cut > sorted[0])
            {
                cuts.Add(cut);
            }
        }

        return [.. cuts];
    }

    /// <summary>A field cut at given points instead of by quantiles.</summary>
    public static T Cut<T>(T field, double[] cuts)
        where T : CodedField
    {
        ArgumentNullException.ThrowIfNull(field);
        return (T)(field with { Bands = cuts, Quantiles = null });
    }
}
