namespace Evenhand.Statistics.Intervals;

/// <summary>A point estimate with its confidence interval.</summary>
/// <param name="Value">The estimate; NaN when the data leave it undefined, may be infinite.</param>
/// <param name="Interval">The interval about it; NaN ends when undefined.</param>
public readonly record struct Estimate(double Value, Interval Interval)
{
    /// <summary>An estimate the data leave undefined: NaN with NaN ends.</summary>
    public static Estimate Undefined => new(double.NaN, Interval.Undefined);
}
