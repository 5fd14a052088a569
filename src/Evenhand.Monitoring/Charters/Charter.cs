namespace Evenhand.Monitoring.Charters;

/// <summary>The monitoring plan of one watched decision stream; validated, read-only.</summary>
public sealed record Charter
{
    /// <summary>Letters a–z, digits and hyphens.</summary>
    public required string Id { get; init; }

    /// <summary>A title for people; the id where none is given.</summary>
    public required string Title { get; init; }

    /// <summary>Who answers for the stream; null where not given.</summary>
    public string? Owner { get; init; }

    /// <summary>Where to read what to do; null where not given.</summary>
    public string? Runbook { get; init; }

    /// <summary>Free keys that travel with alerts and metrics.</summary>
    public IReadOnlyDictionary<string, string> Labels { get; init; } = new Dictionary<string, string>();

    /// <summary>Group labels from elsewhere; null where records carry their own.</summary>
    public LabelFeed? LabelFeed { get; init; }

    /// <summary>The time zone of days and schedules, by its tz database name.</summary>
    public string TimeZone { get; init; } = "Etc/UTC";

    /// <summary>Where the record's id stands; null means the row number (files only).</summary>
    public FieldPath? RecordId { get; init; }

    /// <summary>Where a revision number stands; the pair with the id is then the duplicate key. Null where there is none.</summary>
    public FieldPath? Revision { get; init; }

    /// <summary>Event time; null means the as-of of a replay (files only).</summary>
    public TimeField? Time { get; init; }

    /// <summary>The decision; null only in a charter for learning alone.</summary>
    public DecisionField? Decision { get; init; }

    /// <summary>The score; null where there is none.</summary>
    public ScoreField? Score { get; init; }

    /// <summary>The outcome; null where there is none.</summary>
    public OutcomeField? Outcome { get; init; }

    /// <summary>Fields for whose values sums are kept apart.</summary>
    public IReadOnlyList<SliceField> Slices { get; init; } = [];

    /// <summary>The group fields in charter order.</summary>
    public IReadOnlyList<GroupField> Groups { get; init; } = [];

    /// <summary>Every single group field in charter order, then the intersections.</summary>
    public IReadOnlyList<Grouping> Groupings { get; init; } = [];

    /// <summary>The inputs in charter order.</summary>
    public IReadOnlyList<InputField> Inputs { get; init; } = [];

    /// <summary>The deciding models, where known.</summary>
    public IReadOnlyList<DecisionRule> Rules { get; init; } = [];

    /// <summary>The circuit; null where none is asked for.</summary>
    public CircuitPlan? Circuit { get; init; }

    /// <summary>The windows in charter order.</summary>
    public IReadOnlyList<CharterDuration> Windows { get; init; } = [];

    /// <summary>The fields whose codes, crossed, are the strata of adjusted measures.</summary>
    public IReadOnlyList<AdjustField> Adjust { get; init; } = [];

    /// <summary>What <c>shift</c> rules compare with.</summary>
    public Baseline Baseline { get; init; } = new(new CharterDuration("30d", TimeSpan.FromDays(30)), null, null);

    /// <summary>The declared alert rules in charter order.</summary>
    public IReadOnlyList<AlertRule> Alerts { get; init; } = [];

    /// <summary>When snapshots are taken, as five cron fields in the charter's zone; null means never by schedule.</summary>
    public string? SnapshotSchedule { get; init; }

    /// <summary>Below it a group is not judged, nor chosen as reference.</summary>
    public int MinimumCount { get; init; } = 30;

    /// <summary>Smaller cells are withheld outside the store; 0 switches that off.</summary>
    public int MinimumCell { get; init; } = 10;

    /// <summary>Confidence level, in (0, 1).</summary>
    public double Level { get; init; } = 0.95;

    /// <summary>How late a record may be; null where the charter does not say.</summary>
    public CharterDuration? Lateness { get; init; }

    /// <summary>How far a record may be ahead of its arrival; null where the charter does not say.</summary>
    public CharterDuration? Ahead { get; init; }

    /// <summary>How long a scheduled snapshot waits for stragglers; at most 15 minutes.</summary>
    public CharterDuration Settle { get; init; } = new("2m", TimeSpan.FromMinutes(2));

    /// <summary>How long day sums are kept.</summary>
    public CharterDuration Keep { get; init; } = new("7y", TimeSpan.FromDays(7 * 365));

    /// <summary>Two records of one id count as duplicates when their event times are less than this apart.</summary>
    public CharterDuration Deduplicate { get; init; } = new("24h", TimeSpan.FromHours(24));

    /// <summary>Whether the bytes of rejected records are kept.</summary>
    public bool KeepRejected { get; init; }

    /// <summary>Declared error rates of the outcome.</summary>
    public IReadOnlyList<OutcomeNoise> OutcomeNoise { get; init; } = [];

    /// <summary>The charter file as it was read.</summary>
    public string Text { get; init; } = "";

    /// <summary>SHA-256 of the file's bytes, lower-case hexadecimal.</summary>
    public string Sha256 { get; init; } = "";
}
