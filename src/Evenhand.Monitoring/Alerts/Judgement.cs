using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Measures;

namespace Evenhand.Monitoring.Alerts;

/// <summary>One rule's word on one reading.</summary>
public sealed record Judgement
{
    /// <summary>The rule's name.</summary>
    public required string Rule { get; init; }

    /// <summary>What sort of rule: <c>limit</c>, <c>shift</c>, <c>silence</c> or <c>data_quality</c>.</summary>
    public required string Kind { get; init; }

    /// <summary>How urgent it is.</summary>
    public AlertSeverity Severity { get; init; }

    /// <summary>The charter's rule; null for a rule that needs no declaration.</summary>
    public AlertRule? Declared { get; init; }

    /// <summary>The verdict.</summary>
    public JudgementState State { get; init; }

    /// <summary>The reading judged; null where the rule judges none.</summary>
    public Reading? Reading { get; init; }

    /// <summary>The baseline's reading that it is compared with; null where there is none.</summary>
    public Reading? Before { get; init; }

    /// <summary>The number judged, where it is not the reading's own (a shift, a share, seconds of silence).</summary>
    public double? Value { get; init; }

    /// <summary>The lower end judged.</summary>
    public double? Low { get; init; }

    /// <summary>The upper end judged.</summary>
    public double? High { get; init; }

    /// <summary>The limit below which the rule opens.</summary>
    public double? Below { get; init; }

    /// <summary>The limit above which the rule opens.</summary>
    public double? Above { get; init; }

    /// <summary>What a person has to know.</summary>
    public string? Note { get; init; }
}
