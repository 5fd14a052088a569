namespace Evenhand.Monitoring.Charters;

/// <summary>What kind of number a measure is; bounds the limits that make sense.</summary>
public enum MeasureScale
{
    /// <summary>A share in [0, 1].</summary>
    Rate = 0,

    /// <summary>A difference of two shares, in [−1, 1].</summary>
    RateGap = 1,

    /// <summary>A ratio of rates or odds, from 0 upward.</summary>
    Ratio = 2,

    /// <summary>Any number, in the unit of the measure.</summary>
    Number = 3,
}
