namespace Evenhand.Monitoring.Charters;

/// <summary>The keys that one kind of mapping may have; the JSON Schema lists the same under the same name.</summary>
/// <param name="Name">Name of the mapping in the schema's definitions.</param>
/// <param name="Keys">The known keys.</param>
internal sealed record KeyShape(string Name, params string[] Keys)
{
    /// <summary>Whether keys beyond the known ones are the charter's own choice, such as names of groups.</summary>
    public bool TakesFreeKeys { get; init; }
}
