namespace Evenhand.Monitoring.Charters;

/// <summary>A rule of the charter under <c>alerts</c>: a limit on a measure, a shift against the baseline, or silence.</summary>
public sealed record AlertRule
{
    /// <summary>The rule's name; unique in the charter.</summary>
    public required string Name { get; init; }

    /// <summary>The measure judged; null for <see cref="NoRecordsFor"/>.</summary>
    public string? Measure { get; init; }

    /// <summary>Name of the grouping judged; null means over everyone.</summary>
    public string? Grouping { get; init; }

    /// <summary>The group judged; null means each group.</summary>
    public string? Group { get; init; }

    /// <summary>The field of a missing or unlisted rate; null where the measure has none.</summary>
    public string? Field { get; init; }

    /// <summary>The window judged, one of the charter's texts or <c>all</c>; null means the first.</summary>
    public string? Window { get; init; }

    /// <summary><c>observed</c>, <c>modelled</c> or null for the default.</summary>
    public string? Basis { get; init; }

    /// <summary>Beyond the limit when wholly below this; null unless set.</summary>
    public double? Below { get; init; }

    /// <summary>Beyond the limit when wholly above this; null unless set.</summary>
    public double? Above { get; init; }

    /// <summary>Largest change against the baseline that is still within, as a difference of rates; null unless set.</summary>
    public double? Shift { get; init; }

    /// <summary>Silence that opens the alert; null unless set.</summary>
    public CharterDuration? NoRecordsFor { get; init; }

    /// <summary>How urgent it is.</summary>
    public AlertSeverity Severity { get; init; }

    /// <summary>How long the condition must have been clear before the alert closes; null for the default.</summary>
    public CharterDuration? CloseAfter { get; init; }

    /// <summary>Whether a poorly fitting circuit keeps the rule from being judged.</summary>
    public bool RequireFit { get; init; }

    /// <summary>Whom it concerns; null means the charter's owner.</summary>
    public string? Owner { get; init; }

    /// <summary>What to do; null means the charter's runbook.</summary>
    public string? Runbook { get; init; }

    /// <summary>Free keys that travel with the alert, over the charter's own.</summary>
    public IReadOnlyDictionary<string, string> Labels { get; init; } = new Dictionary<string, string>();

    /// <summary>The line of the charter where the rule stands, from 1.</summary>
    public int Line { get; init; }
}
