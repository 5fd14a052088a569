using Evenhand.Monitoring.Charters.Yaml;

namespace Evenhand.Monitoring.Charters;

/// <summary>Reads names of files beside the charter and asks whether they are there.</summary>
/// <param name="exists">Answers for a name as the charter writes it; null means not asked.</param>
internal sealed class CharterFiles(Func<string, bool>? exists)
{
    /// <summary>A file name, or null.</summary>
    public string? Read(KeyedNode? node, string example)
    {
        string? name = TextValue.Read(node, $"write a file name such as {example}");
        if (name is not null && exists is not null && !exists(name))
        {
            node!.Report($"there is no file {QuotedText.Of(name)} beside the charter", "correct the name, or put the file there");
        }

        return name;
    }
}
