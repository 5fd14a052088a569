namespace Evenhand.Monitoring.Charters;

/// <summary>What a charter is read for; decides which keys it must have.</summary>
public enum CharterUse
{
    /// <summary>Watching decisions: a decision and at least one group are needed.</summary>
    Monitoring = 0,

    /// <summary>Learning a circuit only: inputs or groups are enough.</summary>
    Learning = 1,
}
