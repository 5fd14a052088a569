namespace Evenhand.Monitoring.Charters;

/// <summary>Reads the keys that stand alone.</summary>
internal static class SettingsReader
{
    private static readonly TimeSpan LongestSettle = TimeSpan.FromMinutes(15);

    /// <summary>A charter with everything but the parts that refer to one another.</summary>
    public static Charter Read(MapReader root)
    {
        string id = IdentityReader.Id(root);
        (FieldPath? recordId, FieldPath? revision) = RecordIdReader.Read(root);
        var defaults = new Charter { Id = id, Title = id };
        Charter settings = defaults with
        {
            Title = TextValue.Read(root.Find("title"), "write a title as text") ?? id,
            Owner = TextValue.Read(root.Find("owner"), "name who answers for the stream"),
            Runbook = TextValue.Read(root.Find("runbook"), "say where to read what to do"),
            TimeZone = IdentityReader.TimeZone(root),
            RecordId = recordId,
            Revision = revision,
            Time = TimeReader.Read(root.Find("time")),
            Decision = DecisionReader.Read(root.Find("decision")),
            Score = ScoreReader.Read(root.Find("score")),
            Outcome = OutcomeReader.Read(root.Find("outcome")),
            Windows = WindowReader.Read(root.Find("windows"), root.Has("time")),
            Baseline = BaselineReader.Read(root.Find("baseline")) ?? defaults.Baseline,
            SnapshotSchedule = SnapshotReader.Read(root.Find("snapshots")),
        };
        return Durations(root, Thresholds(root, settings));
    }

    private static Charter Thresholds(MapReader root, Charter settings) => settings with
    {
        MinimumCount = (int?)NumberValue.Whole(root.Find("minimum_count"), 1, int.MaxValue, "30") ?? settings.MinimumCount,
        MinimumCell = (int?)NumberValue.Whole(root.Find("minimum_cell"), 0, int.MaxValue, "10") ?? settings.MinimumCell,
        Level = NumberValue.Read(
            root.Find("level"), v => v is > 0.5 and < 1, "between 0.5 and 1", "write a level such as 0.95") ?? settings.Level,
        KeepRejected = TextValue.Flag(root.Find("keep_rejected")) ?? settings.KeepRejected,
    };

    private static Charter Durations(MapReader root, Charter settings) => settings with
    {
        Lateness = DurationValue.Read(root.Find("lateness"), "7d"),
        Ahead = DurationValue.Read(root.Find("ahead"), "10m"),
        Settle = Settle(root) ?? settings.Settle,
        Keep = DurationValue.Read(root.Find("keep"), "7y") ?? settings.Keep,
        Deduplicate = DurationValue.Read(root.Find("deduplicate"), "24h") ?? settings.Deduplicate,
    };

    private static CharterDuration? Settle(MapReader root)
    {
        CharterDuration? settle = DurationValue.Read(root.Find("settle"), "2m");
        if (settle is { } length && length.Length > LongestSettle)
        {
            root.Report("settle", $"{length} is too long", "write at most 15m");
        }

        return settle;
    }
}
