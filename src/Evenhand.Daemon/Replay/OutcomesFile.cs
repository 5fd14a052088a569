using Evenhand.Daemon.Sources;
using Evenhand.Monitoring.Records;
using Evenhand.Monitoring.Snapshots;
using Evenhand.Monitoring.Windows;

namespace Evenhand.Daemon.Replay;

/// <summary>The outcomes that come apart from their decisions, read whole before the first decision.</summary>
internal sealed class OutcomesFile
{
    private long _read;
    private long _rejected;

    private OutcomesFile()
    {
    }

    /// <summary>The outcomes by id.</summary>
    public OutcomeIndex Index { get; } = new();

    /// <summary>Hash of the file.</summary>
    public string Sha256 { get; private set; } = "";

    /// <summary>Reads an outcomes file.</summary>
    public static OutcomesFile Load(string path, SumLayout layout, IdHasher hasher, Action<string> remark)
    {
        OutcomesFile outcomes = new();
        using RecordFile file = RecordFile.Open(path, layout.Charter, layout.Records, hasher, RecordKind.Outcome);
        RecordBatch batch = new(layout.Records, 4096);
        bool more = true;
        while (more)
        {
            batch.Clear();
            more = file.Fill(batch);
            outcomes.Add(batch, path, file.PlaceOf, remark);
        }

        outcomes.Sha256 = file.Sha256;
        return outcomes;
    }

    /// <summary>What became of the file's records.</summary>
    /// <remarks>A decision's outcome that is found either counts, or came outside the time allowed, or was not known yet at the as-of.</remarks>
    public OutcomesCount CountsOf(ShardCounts counts) => new(
        _read,
        counts.OutcomesMatched,
        Index.Count - Index.FoundCount,
        counts.OutcomesOutside,
        Index.FoundCount - counts.OutcomesMatched - counts.OutcomesOutside,
        Index.Duplicates,
        _rejected);

    private void Add(RecordBatch batch, string path, Func<long, string> placeOf, Action<string> remark)
    {
        Index.Add(batch);
        for (int i = 0; i < batch.Count; i++)
        {
            _read++;
            if (batch.Rejected[i] != RejectReason.None && _rejected++ == 0)
            {
                remark($"the first outcome refused is {path}{placeOf(batch.Positions[i])}, as {batch.Rejected[i].Name()}");
            }
        }
    }
}
