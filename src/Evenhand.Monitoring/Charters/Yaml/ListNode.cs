namespace Evenhand.Monitoring.Charters.Yaml;

/// <summary>A sequence.</summary>
/// <param name="Line">Line, from 1.</param>
/// <param name="Column">Column, from 1.</param>
/// <param name="Items">The items in order.</param>
internal sealed record ListNode(int Line, int Column, IReadOnlyList<SourceNode> Items) : SourceNode(Line, Column)
{
    /// <inheritdoc/>
    public override string Kind => "a list";
}
