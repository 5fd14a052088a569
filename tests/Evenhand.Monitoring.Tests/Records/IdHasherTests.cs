using System.Buffers.Binary;
using System.Text;
using Evenhand.Monitoring.Records;
using Xunit;

namespace Evenhand.Monitoring.Tests.Records;

public sealed class IdHasherTests
{
    private static readonly IdHasher Hasher = new([.. Enumerable.Range(0, IdHasher.KeyLength).Select(i => (byte)i)]);

    // Source: test vectors of the SipHash authors' reference implementation (J.-P. Aumasson, D. J. Bernstein,
    // vectors.h, vectors_sip128): key 00 01 … 0f, message 00 01 … of the given length.
    [Theory]
    [InlineData(0, "a3817f04ba25a8e66df67214c7550293")]
    [InlineData(1, "da87c1d86b99af44347659119b22fc45")]
    [InlineData(2, "8177228da4a45dc7fca38bdef60affe4")]
    [InlineData(3, "9c70b60c5267a94e5f33b6b02985ed51")]
    [InlineData(4, "f88164c12d9c8faf7d0f6e7c7bcd5579")]
    [InlineData(5, "1368875980776f8854527a07690e9627")]
    [InlineData(6, "14eeca338b208613485ea0308fd7a15e")]
    [InlineData(7, "a1f1ebbed8dbc153c0b84aa61ff08239")]
    [InlineData(8, "3b62a9ba6258f5610f83e264f31497b4")]
    [InlineData(15, "5493e99933b0a8117e08ec0f97cfc3d9")]
    [InlineData(16, "6ee2a4ca67b054bbfd3315bf85230577")]
    [InlineData(31, "2939b0183223fafc1723de4f52c43d35")]
    [InlineData(63, "5150d1772f50834a503e069a973fbd7c")]
    public void Hash_ReferenceMessage_GivesThePublishedBytes(int length, string expected)
    {
        byte[] message = [.. Enumerable.Range(0, length).Select(i => (byte)i)];
        Assert.Equal(expected, Hex(Hasher.Hash(message)));
    }

    [Fact]
    public void Hash_IdWithRevision_IsTheHashOfBothJoinedByTheUnitSeparator()
    {
        Assert.Equal(Hasher.Hash("c1\u001F2"u8), Hasher.Hash("c1"u8, "2"u8));
        Assert.NotEqual(Hasher.Hash("c12"u8), Hasher.Hash("c1"u8, "2"u8));
        Assert.NotEqual(Hasher.Hash("c1"u8, "12"u8), Hasher.Hash("c11"u8, "2"u8));
    }

    [Fact]
    public void Hash_IdLongerThanTheStackRoom_IsHashedWhole()
    {
        string id = new('a', 2000);
        Assert.Equal(Hasher.Hash(Encoding.UTF8.GetBytes(id + "\u001F7")), Hasher.Hash(Encoding.UTF8.GetBytes(id), "7"u8));
    }

    [Fact]
    public void Hash_OtherKey_GivesAnotherHash() =>
        Assert.NotEqual(Hasher.Hash("c1"u8), new IdHasher(new byte[IdHasher.KeyLength]).Hash("c1"u8));

    [Theory]
    [InlineData(0)]
    [InlineData(15)]
    [InlineData(17)]
    public void Constructor_KeyOfAnotherLength_Throws(int length) =>
        Assert.Contains($"has {length} bytes", Assert.Throws<ArgumentException>(() => new IdHasher(new byte[length])).Message, StringComparison.Ordinal);

    private static string Hex(IdHash hash)
    {
        byte[] bytes = new byte[16];
        BinaryPrimitives.WriteUInt64LittleEndian(bytes, hash.High);
        BinaryPrimitives.WriteUInt64LittleEndian(bytes.AsSpan(8), hash.Low);
        return Convert.ToHexStringLower(bytes);
    }
}
