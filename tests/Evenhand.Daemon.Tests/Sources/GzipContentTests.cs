using System.Text;
using CsCheck;
using Evenhand.Daemon.Sources;

namespace Evenhand.Daemon.Tests.Sources;

public sealed class GzipContentTests : IDisposable
{
    private static readonly byte[] Plain = Encoding.UTF8.GetBytes(string.Concat(Enumerable.Range(0, 60).Select(i => SourceFolder.Line(i * 7919 % 1000) + "\n")));
    private static readonly byte[] One = SourceFolder.Zip(Plain);

    private readonly SourceFolder _folder = new();

    [Fact]
    public void Read_ConcatenatedMembers_GivesAllOfThem()
    {
        // RFC 1952, section 2.2: a file is a series of members.
        string[] expected = [.. _folder.Read("a.ndjson", [.. Plain, .. Plain, .. Plain])];
        Assert.Equal(180, expected.Length);
        Assert.Equal(expected, _folder.Read("b.ndjson.gz", [.. One, .. One, .. SourceFolder.Zip([]), .. One]));
        Assert.Equal(expected, _folder.Read("c.ndjson.gz", [.. One, .. One, .. One, .. new byte[100]]));
    }

    [Fact]
    public void Read_CutAnywhere_IsAnError()
    {
        for (int length = 0; length < One.Length; length++)
        {
            int at = length;
            SourceException e = Assert.Throws<SourceException>(() => _folder.Read("a.ndjson.gz", One[..at]));
            Assert.Contains("a.ndjson.gz: ", e.Message, StringComparison.Ordinal);
            Assert.Contains("get the file anew", e.Message, StringComparison.Ordinal);
        }
    }

    [Fact]
    public void Read_CutInTheSecondMember_IsAnErrorInEveryFormat()
    {
        byte[] csv = SourceFolder.Zip("case,decision,language,version\nc1,fast,river,v1\n"u8.ToArray());
        for (int length = 1; length < One.Length; length += 7)
        {
            int at = length;
            Assert.Throws<SourceException>(() => _folder.Read("a.ndjson.gz", [.. One, .. One[..at]]));
            Assert.Throws<SourceException>(() => _folder.Read("a.csv.gz", [.. csv, .. csv[..Math.Min(at, csv.Length - 1)]]));
            Assert.Throws<SourceException>(() => _folder.Read("a.parquet.gz", [.. csv, .. csv[..Math.Min(at, csv.Length - 1)]]));
        }
    }

    [Theory]
    [InlineData(1)]
    [InlineData(8)]
    [InlineData(300)]
    public void Read_SomethingElseBehindAMember_IsAnError(int members)
    {
        byte[] many = [.. Enumerable.Repeat(One, members).SelectMany(m => m)];
        byte[] damaged = [.. many, .. One];
        damaged[many.Length] ^= 1;
        Assert.Contains("follows a member", Assert.Throws<SourceException>(() => _folder.Read("a.ndjson.gz", damaged)).Message, StringComparison.Ordinal);
        Assert.Contains("follows a member", Assert.Throws<SourceException>(() => _folder.Read("a.ndjson.gz", [.. many, 1, 2])).Message, StringComparison.Ordinal);
        Assert.Contains("follows a member", Assert.Throws<SourceException>(() => _folder.Read("a.ndjson.gz", [.. many, .. Plain, .. Plain])).Message, StringComparison.Ordinal);
    }

    /// <summary>Whatever byte is changed: an error, or the content as it was (a name or a time in the head does not matter).</summary>
    [Fact]
    public void Read_ByteChanged_IsNeverShortWithoutAWord()
    {
        byte[] two = [.. One, .. One];
        string expected = string.Join('\n', _folder.Read("a.ndjson", [.. Plain, .. Plain]));
        Gen.Select(Gen.Int[2, two.Length - 1], Gen.Byte[1, 255]).Sample(
            (at, change) =>
            {
                byte[] damaged = [.. two];
                damaged[at] ^= change;
                try
                {
                    Assert.Equal(expected, string.Join('\n', _folder.Read("b.ndjson.gz", damaged)));
                }
                catch (SourceException)
                {
                }
            },
            iter: 500,
            threads: 1);
    }

    public void Dispose() => _folder.Dispose();
}
