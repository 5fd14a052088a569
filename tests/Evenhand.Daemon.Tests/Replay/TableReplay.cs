using System.Globalization;
using System.Text;

namespace Evenhand.Daemon.Tests.Replay;

/// <summary>A published table of counts, expanded to one row a person and replayed under a charter made for it.</summary>
internal sealed class TableReplay
{
    private readonly StringBuilder _rows = new("group,stratum,decision\n");
    private readonly List<string> _groups = [];
    private readonly List<string> _strata = [];

    /// <summary>Confidence level of the charter.</summary>
    public double Level { get; init; } = 0.95;

    /// <summary>The group compared with; null takes the one with the highest rate.</summary>
    public string? Reference { get; init; }

    /// <summary>Adds people of a group; the group <c>null</c> stands for a label that is not known.</summary>
    public TableReplay Add(string? group, long events, long others, string stratum = "")
    {
        AddNew(_groups, group);
        AddNew(_strata, stratum);
        AddRows(group, stratum, "yes", events);
        AddRows(group, stratum, "no", others);
        return this;
    }

    /// <summary>Replays the rows.</summary>
    public ReplayedSnapshot Run()
    {
        using WorkFolder folder = new();
        return InProcessReplay.Run(folder.Write("table.yaml", CharterText()), folder.Write("table.csv", _rows.ToString()));
    }

    private static void AddNew(List<string> list, string? text)
    {
        if (!string.IsNullOrEmpty(text) && !list.Contains(text))
        {
            list.Add(text);
        }
    }

    private static string Quoted(IEnumerable<string> texts) => string.Join(", ", texts.Select(t => $"\"{t}\""));

    private void AddRows(string? group, string stratum, string decision, long count)
    {
        for (long i = 0; i < count; i++)
        {
            _rows.Append(group).Append(',').Append(stratum).Append(',').Append(decision).Append('\n');
        }
    }

    private string CharterText()
    {
        string reference = Reference is null ? "" : $", reference: \"{Reference}\"";
        string groups = _groups.Count == 0 ? "" : $"groups: [{{ name: group, at: group, values: [{Quoted(_groups)}]{reference} }}]";
        string adjust = _strata.Count == 0 ? "" : $$"""
            inputs: [{ name: stratum, at: stratum, values: [{{Quoted(_strata)}}] }]
            adjust: [{ field: stratum, why: "as published" }]
            """;
        return string.Create(CultureInfo.InvariantCulture, $$"""
            charter: table
            decision: { at: decision, favourable: ["yes"], unfavourable: ["no"] }
            {{groups}}
            {{adjust}}
            minimum_count: 1
            minimum_cell: 0
            level: {{Level}}
            """);
    }
}
