using System.Globalization;

namespace Evenhand.Testing;

/// <summary>A small comma-separated file with a header, no quoting: what tests/data holds.</summary>
public sealed class CsvTable
{
    private readonly Dictionary<string, int> _columns;

    private CsvTable(string[] header, IReadOnlyList<string[]> rows)
    {
        _columns = header.Select((name, index) => (name, index)).ToDictionary(c => c.name, c => c.index, StringComparer.Ordinal);
        Rows = rows;
    }

    /// <summary>The rows below the header, split into cells.</summary>
    public IReadOnlyList<string[]> Rows { get; }

    /// <summary>Reads a file given relative to tests/data; a leading "data/" is allowed, as the cases have it.</summary>
    public static CsvTable Load(string relative)
    {
        string name = relative.StartsWith("data/", StringComparison.Ordinal) ? relative["data/".Length..] : relative;
        string[][] lines = [.. File.ReadLines(TestData.Path(name)).Where(line => line.Length > 0).Select(Split)];
        return new CsvTable(lines[0], lines[1..]);
    }

    /// <summary>The cell of a row in a named column.</summary>
    public string Cell(string[] row, string column) => row[_columns[column]];

    /// <summary>True when the row has the value that a condition such as "deny=yes" asks for.</summary>
    public bool Matches(string[] row, string condition)
    {
        string[] parts = condition.Split('=', 2);
        return Cell(row, parts[0]) == parts[1];
    }

    /// <summary>The numbers of a column in the rows that pass.</summary>
    public double[] Numbers(string column, Func<string[], bool> where) =>
        [.. Rows.Where(where).Select(row => double.Parse(Cell(row, column), CultureInfo.InvariantCulture))];

    private static string[] Split(string line) =>
        line.Contains('"', StringComparison.Ordinal)
            ? throw new InvalidDataException("Quoted cells are not read here: " + line)
            : line.Split(',');
}
