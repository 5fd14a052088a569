namespace Evenhand.Statistics.Distributions;

/// <summary>
/// The two small terms out of which discrete probabilities are built without the cancellation of large
/// log factorials (Loader, Fast and Accurate Computation of Binomial Probabilities, 2000).
/// </summary>
internal static class Stirling
{
    // ln n! − ln(√(2πn)(n/e)ⁿ) for n = 1 … 15, computed to 40 digits; below 16 the series is too short.
    private static readonly double[] _small =
    [
        0.0810614667953272582,
        0.0413406959554092941,
        0.0276779256849983391,
        0.0207906721037650931,
        0.0166446911898211922,
        0.013876128823070748,
        0.0118967099458917701,
        0.0104112652619720965,
        0.00925546218271273292,
        0.00833056343336287126,
        0.00757367548795184079,
        0.00694284010720952987,
        0.00640899418800420707,
        0.00595137011275884774,
        0.00555473355196280137,
    ];

    /// <summary>The error of Stirling's approximation: ln n! − ln(√(2πn)(n/e)ⁿ), n ≥ 1; absolute error below 1e-16.</summary>
    public static double Error(long n)
    {
        if (n <= _small.Length)
        {
            return _small[n - 1];
        }

        double inverse = 1.0 / n;
        double square = inverse * inverse;
        return inverse * ((1.0 / 12) - (square * ((1.0 / 360) - (square * ((1.0 / 1260) - (square * ((1.0 / 1680) - (square / 1188))))))));
    }

    /// <summary>The deviance part x ln(x/m) + m − x for x ≥ 0, m &gt; 0; non-negative, accurate also where x is near m.</summary>
    public static double Deviance(double x, double m)
    {
        if (x == 0)
        {
            return m;
        }

        double u = (m - x) / x;
        if (Math.Abs(u) > 0.25)
        {
            return (x * Math.Log(x / m)) + m - x;
        }

        // u − ln(1+u) with ln(1+u) = 2 artanh v, v = u/(2+u): the leading 2v is taken off exactly.
        double v = u / (2 + u);
        double square = v * v;
        double power = v * square;
        double series = 0;
        for (int odd = 3; odd < 41 && power != 0; odd += 2)
        {
            series += power / odd;
            power *= square;
        }

        return x * ((u * v) - (2 * series));
    }
}
