namespace Evenhand.Monitoring.Measures;

/// <summary>What a reading rests on, as published.</summary>
public static class BasisNames
{
    /// <summary>Records whose labels are known.</summary>
    public const string Observed = "observed";

    /// <summary>Every record, missing labels by exact expectation under the circuit.</summary>
    public const string Modelled = "modelled";

    /// <summary>What holds whatever the missing labels are.</summary>
    public const string Bounds = "bounds";
}
