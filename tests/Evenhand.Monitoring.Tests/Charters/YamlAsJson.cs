using System.Globalization;
using System.Text.Json.Nodes;
using System.Text.RegularExpressions;
using YamlDotNet.Core;
using YamlDotNet.RepresentationModel;

namespace Evenhand.Monitoring.Tests.Charters;

/// <summary>YAML as the JSON that it stands for, by the core schema of YAML 1.2.2, section 10.3: apart from the program's own reading.</summary>
internal static partial class YamlAsJson
{
    public static JsonNode? Read(string yaml)
    {
        YamlStream stream = [];
        stream.Load(new StringReader(yaml));
        return Of(stream.Documents.Single().RootNode);
    }

    private static JsonNode? Of(YamlNode node) => node switch
    {
        YamlMappingNode map => new JsonObject(map.Select(p => KeyValuePair.Create(((YamlScalarNode)p.Key).Value!, Of(p.Value)))),
        YamlSequenceNode list => new JsonArray([.. list.Select(Of)]),
        YamlScalarNode { Style: ScalarStyle.Plain } plain => Plain(plain.Value!),
        YamlScalarNode quoted => quoted.Value,
        _ => throw new NotSupportedException(node.NodeType.ToString()),
    };

    private static JsonNode? Plain(string text) =>
        text is "" or "~" or "null" or "Null" or "NULL" ? null
        : text is "true" or "True" or "TRUE" ? true
        : text is "false" or "False" or "FALSE" ? false
        : Whole().IsMatch(text) ? long.Parse(text, CultureInfo.InvariantCulture)
        : Number().IsMatch(text) ? double.Parse(text, CultureInfo.InvariantCulture)
        : text;

    [GeneratedRegex("^[-+]?[0-9]+$")]
    private static partial Regex Whole();

    [GeneratedRegex(@"^[-+]?(\.[0-9]+|[0-9]+(\.[0-9]*)?)([eE][-+]?[0-9]+)?$")]
    private static partial Regex Number();
}
