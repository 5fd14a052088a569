using Evenhand.Daemon.Sources;
using Parquet;
using Parquet.Schema;

namespace Evenhand.Daemon.Tests.Sources;

public sealed class ParquetFileTests : IAsyncLifetime, IDisposable
{
    private readonly SourceFolder _folder = new();
    private byte[] _bytes = [];

    [Fact]
    public void Fill_TwoRowGroupsWithNulls_GivesTheSameEntriesAsLines()
    {
        string lines = string.Join('\n', Enumerable.Range(0, 60).Select(Json));
        List<string> expected = _folder.Read("a.ndjson", System.Text.Encoding.UTF8.GetBytes(lines));
        Assert.Equal(60, expected.Count);
        foreach (int batchSize in (int[])[1, 7, 4096])
        {
            Assert.Equal(expected, _folder.Read("a.parquet", _bytes, batchSize));
            Assert.Equal(expected, _folder.Read("a.parquet.gz", SourceFolder.Zip(_bytes), batchSize));
            Assert.Equal(expected, _folder.Read("no-extension", _bytes, batchSize));
        }
    }

    [Fact]
    public void Skip_IntoTheSecondRowGroup_GivesTheTail()
    {
        List<string> all = _folder.Read("a.parquet", _bytes);
        using RecordFile file = _folder.Open("a.parquet");
        file.Skip(43);
        Assert.Equal(all[43..], SourceFolder.Read(file, 10));
    }

    [Fact]
    public void Open_CutAnywhere_IsOneClearLine()
    {
        for (int length = 0; length < _bytes.Length; length += length < 12 || length > _bytes.Length - 12 ? 1 : 23)
        {
            int at = length;
            SourceException e = Assert.Throws<SourceException>(() => _folder.Read("a.parquet", _bytes[..at]));
            Assert.StartsWith("a.parquet: ", e.Message, StringComparison.Ordinal);
            Assert.DoesNotContain('\n', e.Message);
        }
    }

    [Fact]
    public void Read_BytesDamaged_NeverFailsOtherwiseThanWithASourceException()
    {
        Random random = new(3);
        for (int i = 0; i < 300; i++)
        {
            byte[] damaged = [.. _bytes];
            damaged[random.Next(damaged.Length)] ^= (byte)random.Next(1, 256);
            try
            {
                _folder.Read("a.parquet", damaged);
            }
            catch (SourceException e)
            {
                Assert.DoesNotContain('\n', e.Message);
            }
        }
    }

    [Fact]
    public async Task Open_ColumnsMissing_NamesThem()
    {
        ParquetSchema schema = new(new DataField<string>("case"), new DataField<string>("Decision"));
        await using (FileStream stream = File.Create(_folder.At("b.parquet")))
        {
            await using ParquetWriter writer = await ParquetWriter.CreateAsync(schema, stream);
        }

        SourceException e = Assert.Throws<SourceException>(() => _folder.Open("b.parquet"));
        Assert.Contains("no column /decision for decision, the nearest is Decision", e.Message, StringComparison.Ordinal);
        Assert.Contains("no column /language for groups: language", e.Message, StringComparison.Ordinal);
    }

    public async Task InitializeAsync()
    {
        ParquetSchema schema = new(new DataField<string>("case"), new DataField<string>("decision"), new DataField<string>("language"), new DataField<string>("version"));
        DataField[] fields = schema.GetDataFields();
        using MemoryStream stream = new();
        await using (ParquetWriter writer = await ParquetWriter.CreateAsync(schema, stream))
        {
            foreach (int[] group in Enumerable.Range(0, 60).Chunk(35))
            {
                using ParquetRowGroupWriter to = writer.CreateRowGroup();
                await to.WriteAsync(fields[0], group.Select(i => $"c{i}").ToArray());
                await to.WriteAsync(fields[1], group.Select(_ => "fast").ToArray());
                await to.WriteAsync(fields[2], group.Select(i => i % 2 == 0 ? "hill" : "é").ToArray());
                await to.WriteAsync(fields[3], group.Select(i => i % 5 == 0 ? null! : $"v{i % 3}").ToArray());
                to.CompleteValidate();
            }
        }

        _bytes = stream.ToArray();
    }

    public Task DisposeAsync() => Task.CompletedTask;

    public void Dispose() => _folder.Dispose();

    private static string Json(int i)
    {
        string version = i % 5 == 0 ? "null" : $"\"v{i % 3}\"";
        return $$"""{"case":"c{{i}}","decision":"fast","language":"{{(i % 2 == 0 ? "hill" : "é")}}","version":{{version}}}""";
    }
}
