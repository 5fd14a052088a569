namespace Evenhand.Monitoring.Records;

/// <summary>What the records of a source are.</summary>
public enum RecordKind
{
    /// <summary>Decisions: id, time, decision, score, groups, inputs, slices and, where it is known already, the outcome.</summary>
    Decision = 0,

    /// <summary>Outcomes that come apart from their decisions: id and outcome; the time is optional, nothing else is read.</summary>
    Outcome = 1,

    /// <summary>Group labels that come apart from their decisions: the id under the feed's <c>join</c>, and labels; the time is optional.</summary>
    Label = 2,
}
