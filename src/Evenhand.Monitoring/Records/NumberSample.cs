namespace Evenhand.Monitoring.Records;

/// <summary>The numbers of one record as they were read, before they became bands; for cutting quantiles and centring bins.</summary>
/// <param name="fields">Number of coded fields.</param>
public sealed class NumberSample(int fields)
{
    private readonly double[] _values = new double[fields];

    /// <summary>The number of a field in the record read last; NaN where it had none.</summary>
    public double this[int field]
    {
        get => _values[field];
        internal set => _values[field] = value;
    }

    /// <summary>Forgets the last record.</summary>
    public void Reset() => Array.Fill(_values, double.NaN);
}
