namespace Evenhand.Monitoring.Charters.Yaml;

/// <summary>One YAML document as nodes with their places; JSON is read as the subset of YAML that it is.</summary>
/// <param name="Root">The root; null where the text is empty or its notation is broken.</param>
/// <param name="Faults">What is wrong with the notation.</param>
internal sealed record YamlDocument(SourceNode? Root, IReadOnlyList<YamlFault> Faults)
{
    /// <summary>Deepest nesting that is read; a charter needs five levels.</summary>
    public const int MaximumDepth = 32;

    /// <summary>Reads a text. Never throws on what the text holds.</summary>
    public static YamlDocument Read(string text)
    {
        var reader = new YamlEventReader(text);
        try
        {
            return new(reader.ReadDocument(), reader.Faults);
        }
        catch (YamlDotNet.Core.YamlException broken)
        {
            return Broken(reader, YamlSyntaxFault.Describe(broken, text));
        }
        catch (Exception broken) when (broken is InvalidOperationException or ArgumentException or FormatException
            or IndexOutOfRangeException or NullReferenceException or OverflowException or InvalidCastException)
        {
            // The scanner throws these on some kinds of broken notation instead of its own exception.
            return Broken(reader, YamlSyntaxFault.At(reader.LastLine, reader.LastColumn));
        }
    }

    private static YamlDocument Broken(YamlEventReader reader, YamlFault fault) => new(null, [.. reader.Faults, fault]);
}
