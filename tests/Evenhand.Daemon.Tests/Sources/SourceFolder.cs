using System.IO.Compression;
using Evenhand.Daemon.Sources;
using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Records;

namespace Evenhand.Daemon.Tests.Sources;

/// <summary>A temporary folder of inputs of one small charter, and what is read from them.</summary>
internal sealed class SourceFolder : IDisposable
{
    public static readonly Charter Charter = new()
    {
        Id = "flood-grants",
        Title = "Flood-repair grants",
        RecordId = new FieldPath(["/case"]),
        Decision = new DecisionField(new FieldPath(["/decision"]), ["fast"], ["slow"], []),
        Groups = [new GroupField { Name = "language", At = new FieldPath(["/language"]), Values = ["river", "hill", "a,b", "a\nb", "say \"a\"", "é"] }],
        Slices = [new SliceField("version", new FieldPath(["/version"]), null)],
    };

    private static readonly RecordLayout Layout = new(Charter);

    private readonly string _folder = Directory.CreateTempSubdirectory("evenhand-source-folder").FullName;

    public static string Line(int id, string language = "river") => $$"""{"case":"c{{id}}","decision":"fast","language":"{{language}}","version":"v{{id % 3}}"}""";

    public string At(string name) => Path.Combine(_folder, name);

    public RecordFile Open(string name) =>
        RecordFile.Open(At(name), Charter, Layout, new IdHasher(new byte[IdHasher.KeyLength]), RecordKind.Decision);

    /// <summary>Writes a file and gives its entries.</summary>
    public List<string> Read(string name, byte[] bytes, int batchSize = 100)
    {
        File.WriteAllBytes(At(name), bytes);
        return Read(name, batchSize);
    }

    public List<string> Read(string name, int batchSize = 100)
    {
        using RecordFile file = Open(name);
        List<string> entries = Read(file, batchSize);
        if (file.Sha256 != RecordFile.HashOf(At(name)))
        {
            throw new InvalidOperationException("the hash is not that of the file");
        }

        return entries;
    }

    /// <summary>What is left of an input: of a record its code, id and slice, of a rejection its reason.</summary>
    public static List<string> Read(RecordFile file, int batchSize)
    {
        List<string> entries = [];
        RecordBatch batch = new(Layout, batchSize);
        bool more = true;
        while (more)
        {
            batch.Clear();
            more = file.Fill(batch);
            for (int i = 0; i < batch.Count; i++)
            {
                entries.Add(batch.Rejected[i] != RejectReason.None
                    ? batch.Rejected[i].ToString()
                    : $"{batch.CodesOf(i)[0]} {batch.Ids[i].Low:x} {System.Text.Encoding.UTF8.GetString(batch.SliceOf(i, 0))}");
            }
        }

        return entries;
    }

    public static byte[] Zip(byte[] bytes)
    {
        using MemoryStream to = new();
        using (GZipStream zip = new(to, CompressionLevel.Optimal, leaveOpen: true))
        {
            zip.Write(bytes);
        }

        return to.ToArray();
    }

    public void Dispose() => Directory.Delete(_folder, recursive: true);
}
