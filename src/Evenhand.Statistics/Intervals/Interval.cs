namespace Evenhand.Statistics.Intervals;

/// <summary>The two ends of a confidence interval.</summary>
/// <param name="Low">The lower end; NaN when undefined, −∞ when unbounded.</param>
/// <param name="High">The upper end; NaN when undefined, +∞ when unbounded.</param>
public readonly record struct Interval(double Low, double High)
{
    /// <summary>The interval of a quantity that the data leave undefined: both ends NaN.</summary>
    public static Interval Undefined => new(double.NaN, double.NaN);
}
