using System.Text;
using Evenhand.Daemon.Sources;

namespace Evenhand.Daemon.Tests.Sources;

public sealed class CsvFileTests : IDisposable
{
    private const string Header = "case,decision,language,version\n";

    private readonly SourceFolder _folder = new();

    // RFC 4180, section 2, rules 5 to 7, for the quoted cells; what is beyond it by common practice, no source.
    [Theory]
    [InlineData(Header)]
    [InlineData("case,decision,language,version")]
    [InlineData(Header + "c1,fast,\"a,b\",v1\n", "2")]
    [InlineData(Header + "c1,fast,\"a\nb\",v1\nc2,fast,river,v1", "3", "0")]
    [InlineData(Header + "\"c1\",\"fast\",\"say \"\"a\"\"\",\"v1\"\r\n", "4")]
    [InlineData("\uFEFF" + Header + "c1,fast,hill,v1\n", "1")]
    [InlineData("\"case\",\"decision\",\"language\",\"version\"\n\"c1\",\"fast\",\"hill\",\"v1\"\n", "1")]
    [InlineData("case;decision;language;version\nc1;fast;a,b;v1\n", "2")]
    [InlineData("case\tdecision\tlanguage\tversion\nc1\tfast\thill\tv1\n", "1")]
    [InlineData(Header + "c1,fast,hill\nc2,fast,hill,v1,more\nc3,fast,hill,v1\n", "RaggedRow", "RaggedRow", "1")]
    [InlineData(Header + "\nc1,fast,hill,v1\n\r\n  \nc2,fast,hill,v1\n", "BlankLine", "1", "BlankLine", "BlankLine", "1")]
    [InlineData(Header + "c1,fast,,\n", "6")]
    [InlineData(Header + ",fast,hill,v1\nc1,,hill,v1\nc1,Fast,hill,v1\n", "MissingId", "MissingDecision", "UnknownDecision")]
    [InlineData("version,more,language,decision,case\nv1,x,hill,fast,c1\n", "1")]
    [InlineData("/case,decision,/language,version\nc1,fast,hill,v1\n", "1")]
    [InlineData(Header + "c1,fast,é,v1\n", "5")]
    [InlineData(Header + "c1,fast,hill,v1\nc2,fast,hill,\"v1\n", "1", "RaggedRow")]
    public void Fill_Text_GivesAnEntryForEachRow(string text, params string[] entries) =>
        Assert.Equal(entries, _folder.Read("a.csv", Encoding.UTF8.GetBytes(text)).Select(e => e.Split(' ')[0]));

    [Fact]
    public void Fill_QuotedHeaderAndCells_AreTheSameRecordsAsPlainOnes() =>
        Assert.Equal(
            _folder.Read("a.csv", Encoding.UTF8.GetBytes(Header + "c1,fast,hill,v1\nc2,slow,river,\n")),
            _folder.Read("b.csv", Encoding.UTF8.GetBytes("\"case\",\"decision\",\"language\",\"version\"\r\n\"c1\",\"fast\",\"hill\",\"v1\"\r\n\"c2\",\"slow\",\"river\",\"\"\r\n")));

    [Fact]
    public void Fill_BytesThatAreNotUtf8_AreRejectedByTheRow() =>
        Assert.Equal(
            ["1", "InvalidUtf8", "1"],
            _folder.Read("a.csv", [.. Encoding.UTF8.GetBytes(Header + "c1,fast,hill,v1\nc2,fast,h"), 0xE9, .. Encoding.UTF8.GetBytes("ll,v1\nc3,fast,hill,v1\n")]).Select(e => e.Split(' ')[0]));

    [Fact]
    public void Fill_QuotationMarkNeverClosed_IsAnErrorAndSwallowsNoRows()
    {
        string rows = string.Concat(Enumerable.Range(0, 1000).Select(i => $"c{i},fast,{(i == 17 ? "\"" : "")}hill,v1\n"));
        SourceException e = Assert.Throws<SourceException>(() => _folder.Read("a.csv", Encoding.UTF8.GetBytes(Header + rows)));
        Assert.Equal("a.csv: a quotation mark in row 18 is never closed and takes in 982 further lines; close it, or double it if it belongs to the text", e.Message);
    }

    [Fact]
    public void Open_ColumnsMissing_NamesThemAllWithTheNearest()
    {
        File.WriteAllText(_folder.At("a.csv"), "case,decison,Language\nc1,fast,hill\n");
        SourceException e = Assert.Throws<SourceException>(() => _folder.Open("a.csv"));
        Assert.Equal(
            "a.csv: no column /decision for decision, the nearest is decison; correct `at` in the charter or the header; "
            + "no column /language for groups: language, the nearest is Language; correct `at` in the charter or the header; "
            + "no column /version for slices: version, correct `at` in the charter",
            e.Message);
    }

    [Theory]
    [InlineData("case,case,decision,language,version\n", "names a column twice")]
    [InlineData("", "is empty")]
    [InlineData("\n", "no column /case")]
    public void Open_HeaderThatCannotBeUsed_GivesOneClearLine(string text, string part)
    {
        File.WriteAllText(_folder.At("a.csv"), text);
        SourceException e = Assert.Throws<SourceException>(() => _folder.Open("a.csv"));
        Assert.StartsWith("a.csv: ", e.Message, StringComparison.Ordinal);
        Assert.Contains(part, e.Message, StringComparison.Ordinal);
    }

    [Theory]
    [InlineData(1)]
    [InlineData(7)]
    [InlineData(4096)]
    public void Skip_ThenFill_GivesTheTail(int batchSize)
    {
        string rows = string.Concat(Enumerable.Range(0, 300).Select(i => i % 10 == 3 ? "\n" : $"c{i},fast,\"a\nb\",v{i}\n"));
        List<string> all = _folder.Read("a.csv", Encoding.UTF8.GetBytes(Header + rows), batchSize);
        Assert.Equal(300, all.Count);
        using RecordFile file = _folder.Open("a.csv");
        file.Skip(133);
        Assert.Equal(all[133..], SourceFolder.Read(file, batchSize));
        Assert.Equal(RecordFile.HashOf(_folder.At("a.csv")), file.Sha256);
    }

    public void Dispose() => _folder.Dispose();
}
