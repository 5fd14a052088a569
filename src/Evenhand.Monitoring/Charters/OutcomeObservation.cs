namespace Evenhand.Monitoring.Charters;

/// <summary>When an outcome can be seen at all.</summary>
public enum OutcomeObservation
{
    /// <summary>Whatever the decision was.</summary>
    Any = 0,

    /// <summary>Only after a favourable decision, so that rates conditional on the outcome are bounds.</summary>
    Favourable = 1,
}
