using CsCheck;
using Evenhand.Monitoring.Windows;
using Xunit;

namespace Evenhand.Monitoring.Tests.Windows;

public sealed class BucketCodecTests
{
    private static readonly Gen<long[]> Sums = Gen.OneOf(Gen.Const(0L), Gen.Long[-3, 3], Gen.Long).Array[0, 200];

    [Fact]
    public void Pack_AnySums_AddBackToTheSame() => Sums.Sample(sums =>
    {
        long[] back = new long[sums.Length];
        BucketCodec.AddTo(BucketCodec.Pack(sums), back);
        Assert.Equal(sums, back);
    });

    [Fact]
    public void Pack_KnownSums_KeepsItsBytes()
    {
        // Frozen: a store written by one version is read by the next. Version, length 6, 2 zeros, 3 others (1, -1, 300), 1 zero, 0 others.
        string packed = Convert.ToHexString(BucketCodec.Pack([0, 0, 1, -1, 300, 0]));
        Assert.StartsWith("01060203" + "0201D804" + "0100", packed, StringComparison.Ordinal);
        Assert.Equal((10 + 8) * 2, packed.Length);
    }

    [Fact]
    public void AddTo_AnyDamagedByte_IsRefused()
    {
        byte[] packed = BucketCodec.Pack([0, 5, 0, 0, 9, -4]);
        for (int i = 0; i < packed.Length; i++)
        {
            byte[] damaged = [.. packed];
            damaged[i] ^= 0x10;
            Assert.Throws<StoredStateException>(() => BucketCodec.AddTo(damaged, new long[6]));
        }

        Assert.Throws<StoredStateException>(() => BucketCodec.AddTo(packed, new long[7]));
        Assert.Throws<StoredStateException>(() => BucketCodec.AddTo(packed.AsSpan(0, 5), new long[6]));
    }
}
