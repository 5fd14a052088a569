namespace Evenhand.Monitoring.Charters;

/// <summary>One group field or several crossed: what readings are broken down by.</summary>
/// <param name="Name">The field's name, or names joined by <c>+</c>.</param>
/// <param name="Groups">Indices into <see cref="Charter.Groups"/>, at least one, each once.</param>
public sealed record Grouping(string Name, IReadOnlyList<int> Groups);
