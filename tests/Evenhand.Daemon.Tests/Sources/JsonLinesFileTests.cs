using System.Text;
using Evenhand.Daemon.Sources;
using Evenhand.Monitoring.Records;

namespace Evenhand.Daemon.Tests.Sources;

public sealed class JsonLinesFileTests : IDisposable
{
    private readonly SourceFolder _folder = new();

    [Theory]
    [InlineData("")]
    [InlineData("\n", "BlankLine")]
    [InlineData("\r\n\n", "BlankLine", "BlankLine")]
    [InlineData("\uFEFF", "BlankLine")]
    [InlineData("\uFEFF{}", "MissingId")]
    [InlineData("{}\uFEFF", "MalformedJson")]
    [InlineData("{}\r\n{}\r\n", "MissingId", "MissingId")]
    [InlineData("{}\n{}", "MissingId", "MissingId")]
    [InlineData("{}\r{}\n", "MalformedJson")]
    [InlineData("{}\n\uFEFF{}\n", "MissingId", "MalformedJson")]
    [InlineData("{}\n\n \t\r\n[]", "MissingId", "BlankLine", "BlankLine", "NotAnObject")]
    public void Fill_LineEndsAndMarks_GiveAnEntryForEachLine(string text, params string[] entries) =>
        Assert.Equal(entries, _folder.Read("a.ndjson", Encoding.UTF8.GetBytes(text)));

    [Theory]
    [InlineData(1)]
    [InlineData(7)]
    [InlineData(4096)]
    public void Fill_AnyBatchSize_GivesTheSameEntries(int batchSize)
    {
        // Lines of up to 60 kB and some too long, so that lines lie across the reader's buffers (2 MiB) in many ways.
        Random random = new(5);
        StringBuilder text = new();
        List<string> expected = [];
        for (int i = 0; i < 400; i++)
        {
            int pad = i % 97 == 5 ? (1 << 20) + random.Next(3 << 20) : random.Next(60_000);
            text.Append(SourceFolder.Line(i)[..^1]).Append(",\"pad\":\"").Append('a', pad).Append("\"}").Append(i % 2 == 0 ? "\n" : "\r\n");
            expected.Add(i % 97 == 5 ? "TooLong" : $"v{i % 3}");
        }

        byte[] bytes = Encoding.UTF8.GetBytes(text.ToString());
        Assert.Equal(expected, _folder.Read("a.ndjson", bytes, batchSize).Select(e => e.Split(' ')[^1]));
        Assert.Equal(_folder.Read("a.ndjson", 100), _folder.Read("b.ndjson.gz", SourceFolder.Zip(bytes), batchSize));
    }

    [Theory]
    [InlineData(0)]
    [InlineData(1)]
    [InlineData(2)]
    [InlineData(3)]
    public void Fill_LineThatEndsAtTheBuffersEnd_IsOneEntry(int beyond)
    {
        // The buffer holds 2 MiB; spaces are the padding, so that the line is as long as is wished.
        int length = (2 * JsonRecordDecoder.MaximumLength) - 2 + beyond;
        string text = "{}" + new string(' ', length - 2) + "\n" + SourceFolder.Line(1) + "\n";
        Assert.Equal(["TooLong", "v1"], _folder.Read("a.ndjson", Encoding.UTF8.GetBytes(text)).Select(e => e.Split(' ')[^1]));
    }

    [Fact]
    public void Skip_AnyNumber_GivesTheTailAndTheWholeHash()
    {
        List<string> all = _folder.Read("a.ndjson", Encoding.UTF8.GetBytes(string.Join('\n', Enumerable.Range(0, 50).Select(i => i % 9 == 0 ? "" : SourceFolder.Line(i)))));
        for (int skipped = 0; skipped <= 50; skipped++)
        {
            using RecordFile file = _folder.Open("a.ndjson");
            file.Skip(skipped);
            Assert.Equal(skipped, file.Position);
            Assert.Equal(all[skipped..], SourceFolder.Read(file, 7));
            Assert.Equal(50, file.Position);
            Assert.Equal(RecordFile.HashOf(_folder.At("a.ndjson")), file.Sha256);
        }

        using RecordFile tooFar = _folder.Open("a.ndjson");
        Assert.Contains("has fewer records than", Assert.Throws<SourceException>(() => tooFar.Skip(51)).Message, StringComparison.Ordinal);
    }

    [Fact]
    public void Fill_KeptRejections_CarryTheBytesOfTheLine()
    {
        File.WriteAllText(_folder.At("a.ndjson"), SourceFolder.Line(1) + "\n{\"case\":\n\n" + SourceFolder.Line(2) + "\nwhat\r\n");
        RecordBatch batch = new(new RecordLayout(SourceFolder.Charter), 10, keepRejected: true);
        using RecordFile file = _folder.Open("a.ndjson");
        Assert.False(file.Fill(batch));
        Assert.Equal(["", "{\"case\":", "", "", "what"], Enumerable.Range(0, batch.Count).Select(i => Encoding.UTF8.GetString(batch.RejectedBytesOf(i))));
    }

    [Fact]
    public void Open_FileThatMayNotBeRead_GivesOneClearLine()
    {
        File.WriteAllText(_folder.At("a.ndjson"), "{}");

        // A file that another holds for itself alone is refused to root as well, which reads whatever the mode says.
        using FileStream held = new(_folder.At("a.ndjson"), FileMode.Open, FileAccess.ReadWrite, FileShare.None);
        Assert.Contains("check its permissions", Assert.Throws<SourceException>(() => _folder.Open("a.ndjson")).Message, StringComparison.Ordinal);
    }

    public void Dispose() => _folder.Dispose();
}
