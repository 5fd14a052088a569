using Evenhand.Daemon.Sources;
using Evenhand.Monitoring.Records;
using Evenhand.Monitoring.Snapshots;
using Evenhand.Monitoring.Windows;

namespace Evenhand.Daemon.Replay;

/// <summary>The group labels that come apart from their decisions, read whole before the first decision.</summary>
internal sealed class LabelsFile
{
    private long _read;
    private long _rejected;

    private LabelsFile(LabelIndex index) => Index = index;

    /// <summary>The labels by id.</summary>
    public LabelIndex Index { get; }

    /// <summary>Hash of the file.</summary>
    public string Sha256 { get; private set; } = "";

    /// <summary>Where the charter's feed is; null where it has none.</summary>
    /// <param name="charterFile">The charter's file: names are relative to it.</param>
    /// <param name="file">The feed's file as the charter has it.</param>
    public static string? PathOf(string charterFile, string? file) =>
        file is null ? null : Path.Combine(Path.GetDirectoryName(Path.GetFullPath(charterFile))!, file);

    /// <summary>Reads a feed.</summary>
    public static LabelsFile Load(string path, SumLayout layout, IdHasher hasher, Action<string> remark)
    {
        LabelsFile labels = new(new LabelIndex(layout.Charter, layout.Records));
        using RecordFile file = RecordFile.Open(path, layout.Charter, layout.Records, hasher, RecordKind.Label);
        RecordBatch batch = new(layout.Records, 4096);
        bool more = true;
        while (more)
        {
            batch.Clear();
            more = file.Fill(batch);
            labels.Add(batch, path, file.PlaceOf, remark);
        }

        labels.Sha256 = file.Sha256;
        return labels;
    }

    /// <summary>What became of the feed's entries and of the decisions that lacked labels.</summary>
    public LabelsCount CountsOf(ShardCounts counts) =>
        new(_read, Index.Count, Index.Duplicates, _rejected, counts.LabelsFilled, counts.LabelsLate);

    private void Add(RecordBatch batch, string path, Func<long, string> placeOf, Action<string> remark)
    {
        Index.Add(batch);
        for (int i = 0; i < batch.Count; i++)
        {
            _read++;
            if (batch.Rejected[i] != RejectReason.None && _rejected++ == 0)
            {
                remark($"the first label refused is {path}{placeOf(batch.Positions[i])}, as {batch.Rejected[i].Name()}");
            }
        }
    }
}
