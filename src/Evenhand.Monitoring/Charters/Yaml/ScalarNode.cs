namespace Evenhand.Monitoring.Charters.Yaml;

/// <summary>A scalar; its text is kept as written, without any guess at a type.</summary>
/// <param name="Line">Line, from 1.</param>
/// <param name="Column">Column, from 1.</param>
/// <param name="Text">The text, escapes and folding resolved.</param>
/// <param name="IsPlain">Whether it was written without quotation marks or block indicator.</param>
internal sealed record ScalarNode(int Line, int Column, string Text, bool IsPlain) : SourceNode(Line, Column)
{
    /// <inheritdoc/>
    public override string Kind => IsNull ? "empty" : "a single value";

    /// <inheritdoc/>
    public override bool IsNull => IsPlain && (Text is "" or "~" or "null" or "Null" or "NULL");
}
