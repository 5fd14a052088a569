using System.Buffers.Binary;
using Evenhand.Monitoring.Records;

namespace Evenhand.Monitoring.Windows;

/// <summary>The ids seen lately, as keyed hashes: tells duplicates. Part of a shard's state.</summary>
/// <remarks>
/// <para>A record is a duplicate when its id is remembered with an event time less than the charter's <c>deduplicate</c> away, in
/// either direction: so the verdict does not depend on whether a file is in order. The newest <see cref="Capacity"/> ids are
/// remembered; what is forgotten is counted.</para>
/// <para>A ring in order of arrival with chained buckets: 24 bytes an id, and 4 MiB for the heads of the chains. A hash of 96 bits makes a false duplicate among a
/// million ids less likely than 10⁻¹⁷. Not thread-safe.</para>
/// </remarks>
internal sealed class RecentIds
{
    /// <summary>Most ids remembered.</summary>
    public const int Capacity = 1 << 20;

    /// <summary>Bytes of a stored id.</summary>
    public const int EntryBytes = 20;

    private const int HeadCount = 1 << 20;
    private const int ChunkLength = 1 << 14;
    private const int Unused = -2;

    private readonly long _within;
    private readonly int[] _heads = new int[HeadCount];

    // The ring in pieces, made as they are reached: growing one array would leave its halves behind as garbage.
    private readonly Entry[]?[] _ring = new Entry[Capacity / ChunkLength][];
    private long _added;
    private long _stored;

    /// <summary>Remembers no id yet.</summary>
    /// <param name="within">Event times closer than this are duplicates, in microseconds.</param>
    public RecentIds(long within)
    {
        _within = within;
        Array.Fill(_heads, -1);
    }

    /// <summary>Ids ever added.</summary>
    public long Added => _added;

    /// <summary>Ids forgotten because there was no more room.</summary>
    public long Evicted => Math.Max(0, _added - Capacity);

    /// <summary>Remembers an id unless it is a duplicate; says whether it is new.</summary>
    public bool Add(IdHash id, long time)
    {
        int head = HeadOf(id);
        uint check = unchecked((uint)id.Low);
        for (int at = _heads[head]; at >= 0; at = At(at).Next)
        {
            ref Entry entry = ref At(at);
            if (entry.High == id.High && entry.Check == check && Math.Abs(entry.Time - time) < _within)
            {
                return false;
            }
        }

        Insert(id.High, check, time, head);
        return true;
    }

    /// <summary>Brings what ids are looked up by into the cache, all at once; changes nothing.</summary>
    /// <remarks>
    /// Each id is looked up at a random place of some 30 MiB. One by one the core waits for memory each time; side by side the waits
    /// overlap (measured: 90 ns a record less).
    /// </remarks>
    /// <returns>A number without meaning, so that nothing is optimised away.</returns>
    public long Warm(ReadOnlySpan<IdHash> ids)
    {
        Span<int> first = stackalloc int[64];
        long sum = 0;
        for (; !ids.IsEmpty; ids = ids[Math.Min(ids.Length, first.Length)..])
        {
            int count = Math.Min(ids.Length, first.Length);
            for (int i = 0; i < count; i++)
            {
                first[i] = _heads[HeadOf(ids[i])];
            }

            for (int i = 0; i < count; i++)
            {
                sum += first[i] < 0 ? 0 : At(first[i]).Next;
            }
        }

        return sum;
    }

    /// <summary>The ids added since the last call, in order, with a checksum, for the store; empty where there are none.</summary>
    public byte[] TakeNew()
    {
        long from = Math.Max(_stored, _added - Capacity);
        if (from == _added)
        {
            return [];
        }

        byte[] bytes = new byte[((_added - from) * EntryBytes) + Checksum.Length];
        Span<byte> rest = bytes;
        for (long i = from; i < _added; i++, rest = rest[EntryBytes..])
        {
            ref Entry entry = ref At((int)(i % Capacity));
            BinaryPrimitives.WriteUInt64LittleEndian(rest, entry.High);
            BinaryPrimitives.WriteUInt32LittleEndian(rest[8..], entry.Check);
            BinaryPrimitives.WriteInt64LittleEndian(rest[12..], entry.Time);
        }

        Checksum.Write(bytes.AsSpan(..^Checksum.Length), bytes.AsSpan(^Checksum.Length..));
        _stored = _added;
        return bytes;
    }

    /// <summary>Takes ids back from the store, chunk by chunk in order.</summary>
    /// <param name="first">How many ids had been added before this chunk.</param>
    /// <param name="chunk">What <see cref="TakeNew"/> gave.</param>
    /// <exception cref="StoredStateException">The chunk is damaged, or out of order.</exception>
    public void Load(long first, ReadOnlySpan<byte> chunk)
    {
        if (chunk.IsEmpty)
        {
            return;
        }

        if (!Checksum.Holds(chunk) || (chunk.Length - Checksum.Length) % EntryBytes != 0 || first < _added)
        {
            throw new StoredStateException("the stored ids fail their checksum: the store is damaged; restore it, or replay into an empty one");
        }

        _added = first;
        for (chunk = chunk[..^Checksum.Length]; !chunk.IsEmpty; chunk = chunk[EntryBytes..])
        {
            ulong high = BinaryPrimitives.ReadUInt64LittleEndian(chunk);
            uint check = BinaryPrimitives.ReadUInt32LittleEndian(chunk[8..]);
            long time = BinaryPrimitives.ReadInt64LittleEndian(chunk[12..]);
            Insert(high, check, time, HeadOf(new IdHash(high, check)));
        }

        _stored = _added;
    }

    private static int HeadOf(IdHash id) => unchecked((int)(id.High & (HeadCount - 1)));

    private ref Entry At(int slot) => ref _ring[slot / ChunkLength]![slot % ChunkLength];

    private void Insert(ulong high, uint check, long time, int head)
    {
        int slot = (int)(_added % Capacity);
        if (_ring[slot / ChunkLength] is null)
        {
            Entry[] chunk = new Entry[ChunkLength];
            Array.Fill(chunk, new Entry { Next = Unused });
            _ring[slot / ChunkLength] = chunk;
        }

        ref Entry entry = ref At(slot);
        if (entry.Next != Unused)
        {
            Forget(slot);
        }

        entry = new Entry { High = high, Check = check, Time = time, Next = _heads[head] };
        _heads[head] = slot;
        _added++;
    }

    private void Forget(int slot)
    {
        int next = At(slot).Next;
        int head = unchecked((int)(At(slot).High & (HeadCount - 1)));
        if (_heads[head] == slot)
        {
            _heads[head] = next;
            return;
        }

        int at = _heads[head];
        while (At(at).Next != slot)
        {
            at = At(at).Next;
        }

        At(at).Next = next;
    }

    private struct Entry
    {
        public ulong High;
        public long Time;
        public uint Check;
        public int Next;
    }
}
