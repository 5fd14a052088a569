namespace Evenhand.Monitoring.Windows;

/// <summary>The sums of one stretch of event time, unpacked while records come in and packed while none do.</summary>
internal sealed class SumBucket(BucketKey key)
{
    private long[]? _values;
    private byte[]? _packed;

    /// <summary>Which bucket it is.</summary>
    public BucketKey Key { get; } = key;

    /// <summary>Whether it changed since it was last stored.</summary>
    public bool IsDirty { get; set; }

    /// <summary>When it was last added to, in records.</summary>
    public long LastUse { get; set; }

    /// <summary>Whether its sums are unpacked.</summary>
    public bool IsOpen => _values is not null;

    /// <summary>A bucket as stored.</summary>
    public static SumBucket Stored(BucketKey key, byte[] packed) => new(key) { _packed = packed };

    /// <summary>The sums to add to, if the bucket is open.</summary>
    public long[] Values => _values!;

    /// <summary>Unpacks the sums into an array of zeros.</summary>
    public void Open(long[] zeros)
    {
        if (_values is null)
        {
            _values = zeros;
            if (_packed is not null)
            {
                BucketCodec.AddTo(_packed, _values);
            }
        }

        _packed = null;
    }

    /// <summary>The stored form; the bucket stays as it is.</summary>
    public byte[] Pack() => _packed ?? BucketCodec.Pack(_values);

    /// <summary>Packs the sums to save memory and gives their array back.</summary>
    public long[] Close()
    {
        _packed = Pack();
        long[] values = _values!;
        _values = null;
        return values;
    }

    /// <summary>Adds the sums to others.</summary>
    public void AddTo(Span<long> into)
    {
        if (_values is null)
        {
            if (_packed is not null)
            {
                BucketCodec.AddTo(_packed, into);
            }

            return;
        }

        ReadOnlySpan<long> values = _values;
        for (int i = 0; i < values.Length; i++)
        {
            into[i] += values[i];
        }
    }
}
