using Evenhand.Testing;

namespace Evenhand.Daemon.Tests.Replay;

/// <summary>The open datasets with the charters of tests/data/charters/open.</summary>
internal static class OpenData
{
    /// <summary>Replays a dataset under its charter, with texts of the charter replaced.</summary>
    /// <param name="charter">Name of the charter.</param>
    /// <param name="csv">Name of the data file.</param>
    /// <param name="only">Keeps the rows with this value, such as <c>city=boston</c>; null keeps all.</param>
    /// <param name="changes">What to replace in the charter; each must be found.</param>
    public static ReplayedSnapshot Replay(string charter, string csv, string? only = null, params (string Old, string New)[] changes)
    {
        using WorkFolder folder = new();
        string charterFile = folder.Write("charter.yaml", Changed(charter, changes));
        string input = only is null ? TestData.Path(csv) : folder.Write(csv, Kept(csv, only));
        return InProcessReplay.Run(charterFile, input);
    }

    /// <summary>Replays rows made by a test under a dataset's charter.</summary>
    public static ReplayedSnapshot ReplayRows(string charter, string csvText, params (string Old, string New)[] changes)
    {
        using WorkFolder folder = new();
        return InProcessReplay.Run(folder.Write("charter.yaml", Changed(charter, changes)), folder.Write("rows.csv", csvText));
    }

    private static string Changed(string charter, (string Old, string New)[] changes)
    {
        string text = File.ReadAllText(TestData.Path($"charters/open/{charter}.yaml"));
        foreach ((string old, string @new) in changes)
        {
            Assert.Contains(old, text, StringComparison.Ordinal);
            text = text.Replace(old, @new, StringComparison.Ordinal);
        }

        return text;
    }

    private static string Kept(string csv, string only)
    {
        string[] lines = File.ReadAllLines(TestData.Path(csv));
        string[] condition = only.Split('=');
        int column = Array.IndexOf(lines[0].Split(','), condition[0]);
        return string.Join('\n', lines.Where((line, i) => i == 0 || line.Split(',')[column] == condition[1]));
    }
}
