using System.Runtime.InteropServices;

namespace Evenhand.Monitoring.Windows;

/// <summary>The buckets of a shard. Only the most recently used are unpacked, so memory does not grow with traffic.</summary>
/// <remarks>Which buckets exist depends on the records alone, not on when they are packed, stored or pruned. Not thread-safe.</remarks>
internal sealed class BucketTable(int length, Retention retention)
{
    private const int OpenBytes = 4 << 20;
    private const int TierCount = 4;

    private readonly Dictionary<BucketKey, SumBucket> _buckets = [];
    private readonly int _openLimit = Math.Clamp(OpenBytes / (length * sizeof(long)), 16, 4096);

    // Neighbouring records mostly fall into the same buckets: the last one of each tier and slice is found without hashing.
    private SumBucket?[] _last = new SumBucket?[TierCount];

    // Arrays of closed buckets, cleared, to be used again.
    private readonly Stack<long[]> _spare = [];
    private int _open;
    private long _uses;

    /// <summary>All buckets, in no order.</summary>
    public IEnumerable<SumBucket> Buckets => _buckets.Values;

    /// <summary>The sums to add a record to.</summary>
    public long[] Open(BucketKey key)
    {
        int place = (key.Slice * TierCount) + (int)key.Tier;
        if (place < _last.Length && _last[place] is { IsOpen: true } last && last.Key.Start == key.Start)
        {
            last.IsDirty = true;
            last.LastUse = ++_uses;
            return last.Values;
        }

        if (place >= _last.Length)
        {
            Array.Resize(ref _last, (key.Slice + 1) * TierCount);
        }

        SumBucket bucket = Find(key);
        _last[place] = bucket;
        return bucket.Values;
    }

    private SumBucket Find(BucketKey key)
    {
        ref SumBucket? bucket = ref CollectionsMarshal.GetValueRefOrAddDefault(_buckets, key, out _);
        bucket ??= new SumBucket(key);
        bucket.IsDirty = true;
        bucket.LastUse = ++_uses;
        SumBucket found = bucket;
        if (!found.IsOpen)
        {
            if (_open >= _openLimit)
            {
                CloseOldest();
            }

            found.Open(_spare.Count > 0 ? _spare.Pop() : new long[length]);
            _open++;
        }

        return found;
    }

    /// <summary>Takes a bucket from the store.</summary>
    /// <exception cref="StoredStateException">It is damaged. Said now, not when somebody first needs it: a damaged store is not to be built upon.</exception>
    public void Load(BucketKey key, byte[] packed)
    {
        BucketCodec.Verify(packed);
        _buckets[key] = SumBucket.Stored(key, packed);
    }

    /// <summary>Drops the buckets that are too old to be kept and says which.</summary>
    public List<BucketKey> Prune(long newest)
    {
        List<BucketKey> dropped = [];
        foreach ((BucketKey key, SumBucket bucket) in _buckets)
        {
            if (key.Tier != Tier.All && key.Start < retention.Earliest(key.Tier, newest))
            {
                dropped.Add(key);
                if (bucket.IsOpen)
                {
                    Spare(bucket.Values);
                    _open--;
                }

                _buckets.Remove(key);
            }
        }

        if (dropped.Count > 0)
        {
            Array.Clear(_last);
        }

        return dropped;
    }

    /// <summary>Packs the changed buckets for the store and takes them as stored.</summary>
    public List<StoredBucket> TakeDirty()
    {
        List<StoredBucket> dirty = [];
        foreach (SumBucket bucket in _buckets.Values)
        {
            if (bucket.IsDirty)
            {
                dirty.Add(new StoredBucket(bucket.Key, bucket.Pack()));
                bucket.IsDirty = false;
            }
        }

        return dirty;
    }

    private void Spare(long[] values)
    {
        Array.Clear(values);
        _spare.Push(values);
    }

    private void CloseOldest()
    {
        List<SumBucket> open = [.. _buckets.Values.Where(b => b.IsOpen).OrderBy(b => b.LastUse)];
        foreach (SumBucket bucket in open.Take((open.Count / 2) + 1))
        {
            Spare(bucket.Close());
            _open--;
        }
    }
}
