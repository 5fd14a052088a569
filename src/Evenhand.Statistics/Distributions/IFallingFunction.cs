namespace Evenhand.Statistics.Distributions;

/// <summary>A strictly falling function of one variable; structs implement it so that solving allocates nothing.</summary>
internal interface IFallingFunction
{
    /// <summary>The value at <paramref name="t"/>.</summary>
    double At(double t);
}
