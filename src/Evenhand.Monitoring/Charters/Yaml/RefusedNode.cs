namespace Evenhand.Monitoring.Charters.Yaml;

/// <summary>Stands where something was already refused, so that nothing is reported twice.</summary>
/// <param name="Line">Line, from 1.</param>
/// <param name="Column">Column, from 1.</param>
internal sealed record RefusedNode(int Line, int Column) : SourceNode(Line, Column)
{
    /// <inheritdoc/>
    public override string Kind => "refused";
}
