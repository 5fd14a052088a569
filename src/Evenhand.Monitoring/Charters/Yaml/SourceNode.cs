namespace Evenhand.Monitoring.Charters.Yaml;

/// <summary>A node of a YAML document with the place where it begins.</summary>
/// <param name="Line">Line, from 1.</param>
/// <param name="Column">Column in UTF-16 code units, from 1.</param>
internal abstract record SourceNode(int Line, int Column)
{
    /// <summary>What the node is, as messages say it.</summary>
    public abstract string Kind { get; }

    /// <summary>Whether it is one of the plain null forms of YAML 1.2.</summary>
    public virtual bool IsNull => false;
}
