namespace Evenhand.Monitoring.Charters;

/// <summary>The score behind the decision; higher is more favourable.</summary>
/// <param name="At">The place.</param>
/// <param name="Low">The least possible score.</param>
/// <param name="High">The greatest possible score, above <paramref name="Low"/>.</param>
public sealed record ScoreField(FieldPath At, double Low, double High)
{
    /// <summary>The name under which missing and unusable scores are counted; in brackets so that no input can share it.</summary>
    public const string FieldName = "(score)";
}
