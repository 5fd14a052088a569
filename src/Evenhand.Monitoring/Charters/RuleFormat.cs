namespace Evenhand.Monitoring.Charters;

/// <summary>The notation of a rule file.</summary>
public enum RuleFormat
{
    /// <summary>Predictive Model Markup Language.</summary>
    Pmml = 0,

    /// <summary>Open Neural Network Exchange, machine-learning operators.</summary>
    Onnx = 1,
}
