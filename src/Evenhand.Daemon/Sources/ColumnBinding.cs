using Evenhand.Monitoring.Records;

namespace Evenhand.Daemon.Sources;

/// <summary>Finds the charter's places among a table's columns.</summary>
internal static class ColumnBinding
{
    /// <summary>Binds a decoder.</summary>
    /// <exception cref="SourceException">A field has no column; all such fields are named.</exception>
    public static void Bind(RowDecoder decoder, IReadOnlyList<string> columns, string name)
    {
        UnknownColumn[] missing = [.. decoder.Bind(columns).Where(c => c.Required)];
        if (missing.Length > 0)
        {
            throw new SourceException($"{name}: {string.Join("; ", missing.Select(Sentence))}");
        }
    }

    private static string Sentence(UnknownColumn column)
    {
        string mend = column.Nearest is null ? "correct `at` in the charter" : $"the nearest is {column.Nearest}; correct `at` in the charter or the header";
        return $"no column {column.Places} for {column.Key}, {mend}";
    }
}
