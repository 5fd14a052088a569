using System.Globalization;
using System.IO.Compression;
using Evenhand.Daemon.Sources;
using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Records;
using Parquet;
using Parquet.Schema;
using FieldPath = Evenhand.Monitoring.Charters.FieldPath;

namespace Evenhand.Daemon.Tests.Sources;

public sealed class RecordFileTests : IDisposable
{
    private static readonly Charter Charter = new()
    {
        Id = "flood-grants",
        Title = "Flood-repair grants",
        RecordId = new FieldPath(["case"]),
        Time = new TimeField(new FieldPath(["at"]), TimeUnit.Rfc3339),
        Decision = new DecisionField(new FieldPath(["fast"]), ["true"], ["false"], []),
        Score = new ScoreField(new FieldPath(["score"]), 0, 1),
        Groups = [new GroupField { Name = "language", At = new FieldPath(["language"]), Values = ["river", "hill"] }],
        Inputs = [new InputField { Name = "damage", At = new FieldPath(["damage"]), Bands = [0, 100] }],
    };

    private readonly string _folder = Directory.CreateTempSubdirectory("evenhand-sources").FullName;

    [Theory]
    [InlineData(1)]
    [InlineData(7)]
    [InlineData(4096)]
    public async Task Fill_SameRecordsInEveryFormat_GiveTheSameEntries(int batchSize)
    {
        Row[] rows = [.. Enumerable.Range(0, 50).Select(i => new Row(i, i % 5 == 0 ? null : i % 2 == 0 ? "river" : "hi,ll", i % 7 == 0 ? null : i * 5, i % 3 == 0, i / 64.0))];
        File.WriteAllLines(At("a.ndjson"), rows.Select(r => r.Json()));
        File.WriteAllLines(At("a.csv"), rows.Select(r => r.Csv()).Prepend("case,at,fast,score,language,damage"));
        await WriteParquet(rows);
        using (GZipStream zip = new(File.Create(At("b.ndjson.gz")), CompressionLevel.Fastest))
        {
            zip.Write(File.ReadAllBytes(At("a.ndjson")));
        }

        string expected = Entries("a.ndjson", 4096);
        Assert.All(["a.ndjson", "a.csv", "a.parquet", "b.ndjson.gz"], file => Assert.Equal(expected, Entries(file, batchSize)));
        Assert.Contains("None", expected, StringComparison.Ordinal);
    }

    [Fact]
    public void Fill_LongAndBlankLinesAmongGoodOnes_GivesAnEntryForEach()
    {
        string good = new Row(1, "river", 5, true, 0.5).Json();
        File.WriteAllText(At("a.ndjson"), "\uFEFF" + good + "\r\n\n" + "{\"pad\":\"" + new string('a', 10_000_000) + "\"}\n" + good.Replace("\"c1\"", "\"c2\"", StringComparison.Ordinal));
        Assert.Equal(["None", "BlankLine", "TooLong", "None"], Read("a.ndjson", 3).Select(e => e.Split(' ')[0]));
    }

    [Fact]
    public void Skip_ThenFill_GivesTheTailAndTheWholeHash()
    {
        File.WriteAllLines(At("a.ndjson"), Enumerable.Range(0, 100).Select(i => new Row(i, "river", 1, true, 0).Json()));
        string[] all = [.. Read("a.ndjson", 10)];
        using RecordFile file = Open("a.ndjson");
        file.Skip(60);
        RecordBatch batch = new(new RecordLayout(Charter), 4096);
        while (file.Fill(batch))
        {
        }

        Assert.Equal(40, batch.Count);
        Assert.Equal(60, batch.Positions[0]);
        Assert.Equal(RecordFile.HashOf(At("a.ndjson")), file.Sha256);
        Assert.Equal(100, all.Length);
    }

    [Fact]
    public void Fill_FileCutWhileRead_SaysSo()
    {
        File.WriteAllLines(At("a.ndjson"), Enumerable.Range(0, 100_000).Select(i => new Row(i, "river", 1, true, 0).Json()));
        using RecordFile file = Open("a.ndjson");
        RecordBatch batch = new(new RecordLayout(Charter), 10);
        file.Fill(batch);
        using (FileStream cut = new(At("a.ndjson"), FileMode.Open, FileAccess.Write, FileShare.ReadWrite))
        {
            cut.SetLength(3_000_000);
        }

        SourceException e = Assert.Throws<SourceException>(() => ReadAll(file));
        Assert.Contains("was cut while it was read", e.Message, StringComparison.Ordinal);
    }

    [Fact]
    public void Fill_FileGrowingWhileRead_UsesWhatWasThereAndSaysSo()
    {
        File.WriteAllLines(At("a.ndjson"), Enumerable.Range(0, 10).Select(i => new Row(i, "river", 1, true, 0).Json()));
        using RecordFile file = Open("a.ndjson");
        File.AppendAllLines(At("a.ndjson"), [new Row(11, "river", 1, true, 0).Json()]);
        Assert.Equal(10, ReadAll(file).Count);
        Assert.Contains("grew while it was read", file.Warning, StringComparison.Ordinal);
    }

    [Theory]
    [InlineData("a.csv", "case,at,fast,score,language,damage\n1,2031-03-01T00:00:00Z,true,0.5,\"river\n", "RaggedRow")]
    [InlineData("b.csv", "case,at,fast,score,language,damage\n1,2031-03-01T00:00:00Z,true\n", "RaggedRow")]
    [InlineData("c.csv", "case;at;fast;score;language;damage\r\n1;2031-03-01T00:00:00Z;true;0.5;river;5\r\n", "None")]
    [InlineData("d.csv", "case\tat\tfast\tscore\tlanguage\tdamage\n1\t2031-03-01T00:00:00Z\ttrue\t0.5\t\"a\"\"b\"\t5\n", "None")]
    public void Fill_OddRows_AreRejectedOrRead(string file, string text, string reason)
    {
        File.WriteAllText(At(file), text);
        Assert.Equal([reason], Read(file, 10).Select(e => e.Split(' ')[0]));
    }

    [Theory]
    [InlineData("a.csv", "", "is empty")]
    [InlineData("a.csv", "case,at,fast,score,langauge\n", "the nearest is langauge")]
    [InlineData("a.parquet", "PAR1 and no more", "no Parquet file")]
    [InlineData("a.ndjson.gz", "{}", "is named .gz but is not compressed")]
    public void Open_FileThatCannotBeRead_GivesOneClearLine(string file, string text, string part)
    {
        File.WriteAllText(At(file), text);
        SourceException e = Assert.Throws<SourceException>(() => Open(file).Dispose());
        Assert.Contains(part, e.Message, StringComparison.Ordinal);
        Assert.DoesNotContain('\n', e.Message);
    }

    [Fact]
    public void Open_NoFileOrAFolder_GivesOneClearLine()
    {
        Assert.Contains("no such file", Assert.Throws<SourceException>(() => Open("none.csv")).Message, StringComparison.Ordinal);
        Directory.CreateDirectory(At("folder"));
        Assert.Contains("is a folder", Assert.Throws<SourceException>(() => Open("folder")).Message, StringComparison.Ordinal);
    }

    public void Dispose() => Directory.Delete(_folder, recursive: true);

    private string At(string name) => Path.Combine(_folder, name);

    private RecordFile Open(string name) =>
        RecordFile.Open(At(name), Charter, new RecordLayout(Charter), new IdHasher(new byte[IdHasher.KeyLength]), RecordKind.Decision);

    private string Entries(string file, int batchSize) => string.Join('\n', Read(file, batchSize));

    private List<string> Read(string name, int batchSize)
    {
        using RecordFile file = Open(name);
        return ReadAll(file, batchSize);
    }

    private static List<string> ReadAll(RecordFile file, int batchSize = 100)
    {
        List<string> entries = [];
        RecordBatch batch = new(new RecordLayout(Charter), batchSize);
        bool more = true;
        while (more)
        {
            batch.Clear();
            more = file.Fill(batch);
            for (int i = 0; i < batch.Count; i++)
            {
                entries.Add(batch.Rejected[i] != RejectReason.None
                    ? batch.Rejected[i].ToString()
                    : $"None {batch.Ids[i]} {batch.Times[i]} {batch.Decisions[i]} {batch.Scores[i]} {string.Join(',', batch.CodesOf(i).ToArray())}");
            }
        }

        return entries;
    }

    private async Task WriteParquet(Row[] rows)
    {
        ParquetSchema schema = new(
            new DataField<string>("case"),
            new DataField<DateTime>("at"),
            new DataField<bool>("fast"),
            new DataField<double>("score"),
            new DataField<string>("language"),
            new DataField<int?>("damage"));
        DataField[] fields = schema.GetDataFields();
        await using FileStream stream = File.Create(At("a.parquet"));
        await using ParquetWriter writer = await ParquetWriter.CreateAsync(schema, stream);
        foreach (Row[] group in rows.Chunk(20))
        {
            using ParquetRowGroupWriter to = writer.CreateRowGroup();
            await to.WriteAsync(fields[0], group.Select(r => $"c{r.Id}").ToArray());
            await to.WriteAsync<DateTime>(fields[1], group.Select(r => r.Time).ToArray());
            await to.WriteAsync<bool>(fields[2], group.Select(r => r.Fast).ToArray());
            await to.WriteAsync<double>(fields[3], group.Select(r => r.Score).ToArray());
            await to.WriteAsync(fields[4], group.Select(r => r.Language!).ToArray());
            await to.WriteAsync<int>(fields[5], (ReadOnlyMemory<int?>)group.Select(r => r.Damage).ToArray());
            to.CompleteValidate();
        }
    }

    private sealed record Row(int Id, string? Language, int? Damage, bool Fast, double Score)
    {
        public DateTime Time => new DateTime(2031, 3, 1, 0, 0, 0, DateTimeKind.Utc).AddMinutes(Id);

        private string TimeText => Time.ToString("yyyy-MM-dd'T'HH:mm:ss'Z'", CultureInfo.InvariantCulture);

        private string ScoreText => Score.ToString("R", CultureInfo.InvariantCulture);

        private string FastText => Fast ? "true" : "false";

        public string Json() =>
            $$"""{"case":"c{{Id}}","at":"{{TimeText}}","fast":{{FastText}},"score":{{ScoreText}},"language":{{(Language is null ? "null" : $"\"{Language}\"")}},"damage":{{Damage?.ToString(CultureInfo.InvariantCulture) ?? "null"}}}""";

        public string Csv() => $"c{Id},{TimeText},{FastText},{ScoreText},\"{Language}\",{Damage?.ToString(CultureInfo.InvariantCulture)}";
    }
}
