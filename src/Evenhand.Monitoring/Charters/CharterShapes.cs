namespace Evenhand.Monitoring.Charters;

/// <summary>Every mapping of a charter with its known keys; the only list of keys in the program.</summary>
internal static class CharterShapes
{
    public static readonly KeyShape Charter = new(
        "charter", "charter", "title", "owner", "runbook", "labels", "time_zone", "id", "revision", "time", "decision", "score",
        "outcome", "outcome_noise", "slices", "groups", "intersections", "inputs", "rule", "circuit", "windows", "adjust",
        "baseline", "alerts", "snapshots", "minimum_count", "minimum_cell", "level", "lateness", "ahead", "settle", "keep",
        "deduplicate", "keep_rejected");

    public static readonly KeyShape Labels = new("labels", "topic", "file", "at", "join", "wait") { TakesFreeKeys = true };
    public static readonly KeyShape RecordId = new("id", "at", "revision");
    public static readonly KeyShape Time = new("time", "at", "unit");
    public static readonly KeyShape Decision = new("decision", "at", "favourable", "unfavourable", "other");
    public static readonly KeyShape Score = new("score", "at", "range");
    public static readonly KeyShape Outcome = new("outcome", "at", "positive", "negative", "within", "observed_when");
    public static readonly KeyShape OutcomeNoise = new("outcome_noise", "grouping", "false_positive", "false_negative");
    public static readonly KeyShape Slice = new("slice", "name", "at", "values");

    public static readonly KeyShape Group = new(
        "group", "name", "at", "values", "bands", "reference", "missing", "declined", "probabilities", "prior");

    public static readonly KeyShape Input = new("input", "name", "at", "values", "bands", "quantiles", "missing", "declined");
    public static readonly KeyShape Rule = new("rule", "pmml", "onnx", "at_least", "at_most", "favourable", "fields", "version");
    public static readonly KeyShape Circuit = new("circuit", "profiles", "sample", "warm_up", "window", "prior_records");
    public static readonly KeyShape Adjust = new("adjust", "field", "why");
    public static readonly KeyShape Baseline = new("baseline", "from", "to");

    public static readonly KeyShape Alert = new(
        "alert", "name", "measure", "grouping", "group", "field", "window", "basis", "below", "above", "shift",
        "no_records_for", "severity", "close_after", "require_fit", "owner", "runbook", "labels");

    public static readonly KeyShape Snapshots = new("snapshots", "schedule");

    /// <summary>A mapping whose keys are all the charter's own.</summary>
    public static readonly KeyShape Free = new("free") { TakesFreeKeys = true };

    /// <summary>Every shape with known keys.</summary>
    public static IReadOnlyList<KeyShape> All { get; } =
    [
        Charter, Labels, RecordId, Time, Decision, Score, Outcome, OutcomeNoise, Slice, Group, Input, Rule, Circuit, Adjust,
        Baseline, Alert, Snapshots,
    ];
}
