namespace Evenhand.Monitoring.Charters.Yaml;

/// <summary>A mapping; keys that occur twice are kept for the reader to refuse.</summary>
/// <param name="Line">Line, from 1.</param>
/// <param name="Column">Column, from 1.</param>
/// <param name="Pairs">Keys and values in order.</param>
internal sealed record MapNode(int Line, int Column, IReadOnlyList<(ScalarNode Key, SourceNode Value)> Pairs)
    : SourceNode(Line, Column)
{
    /// <inheritdoc/>
    public override string Kind => "a mapping";
}
