using Evenhand.Monitoring.Charters;

namespace Evenhand.Monitoring.Windows;

/// <summary>Where the sums of one grouping stand in a bucket.</summary>
/// <remarks>
/// A grouping's cells are all combinations of its groups' codes, the special codes among them, numbered with the last
/// group running fastest. The grouping "everyone" has no groups and one cell.
/// </remarks>
public sealed class GroupingShape
{
    private readonly int[] _strides;
    private readonly int[] _groups;

    internal GroupingShape(string? name, IReadOnlyList<int> groups, IReadOnlyList<CodedField> fields)
    {
        Name = name;
        Groups = groups;
        _groups = [.. groups];
        Fields = [.. groups.Select(g => fields[g])];
        _strides = new int[groups.Count];
        int cells = 1;
        for (int i = groups.Count - 1; i >= 0; i--)
        {
            _strides[i] = cells;
            cells *= Fields[i].CodeCount;
        }

        Cells = cells;
    }

    /// <summary>The grouping's name; null for everyone.</summary>
    public string? Name { get; }

    /// <summary>Indices of its group fields.</summary>
    public IReadOnlyList<int> Groups { get; }

    /// <summary>Its group fields.</summary>
    public IReadOnlyList<CodedField> Fields { get; }

    /// <summary>Number of cells, those with special codes among them.</summary>
    public int Cells { get; }

    /// <summary>Where the decision counts begin: <see cref="SumLayout.CountWidth"/> a cell.</summary>
    public int CountsAt { get; internal init; }

    /// <summary>Where the score sums begin: <see cref="SumLayout.ScoreWidth"/> a cell; −1 where there is no score.</summary>
    public int ScoresAt { get; internal init; }

    /// <summary>Where the missing and unlisted counts begin: two a field and cell.</summary>
    public int AbsencesAt { get; internal init; }

    /// <summary>Where the stratum counts begin: two a stratum and cell; −1 where nothing is adjusted for, and for everyone.</summary>
    public int StrataAt { get; internal init; }

    /// <summary>The cell of a record.</summary>
    /// <param name="codes">The record's codes, groups first.</param>
    public int CellOf(ReadOnlySpan<ushort> codes)
    {
        // Cells are numbered below the layout's limit, so nothing here can overflow.
        int cell = 0;
        for (int i = 0; i < _groups.Length; i++)
        {
            cell = unchecked(cell + (codes[_groups[i]] * _strides[i]));
        }

        return cell;
    }

    /// <summary>The code that a cell has in the i-th of the grouping's fields.</summary>
    public int CodeOf(int cell, int i) => cell / _strides[i] % Fields[i].CodeCount;

    /// <summary>The cell of given codes, one for each of the grouping's fields.</summary>
    public int CellOf(params ReadOnlySpan<int> codes)
    {
        int cell = 0;
        for (int i = 0; i < _strides.Length; i++)
        {
            cell += codes[i] * _strides[i];
        }

        return cell;
    }

    /// <summary>Whether every code of a cell is a listed one.</summary>
    public bool IsListed(int cell)
    {
        for (int i = 0; i < _strides.Length; i++)
        {
            if (CodeOf(cell, i) >= Fields[i].ListedCount)
            {
                return false;
            }
        }

        return true;
    }

    /// <summary>The cells whose codes are all listed, in charter order.</summary>
    public IEnumerable<int> ListedCells() => Enumerable.Range(0, Cells).Where(IsListed);

    /// <summary>The cell's labels joined by <c>+</c>, such as <c>hill+30..45</c>.</summary>
    public string Label(int cell) => string.Join('+', Labels(cell));

    /// <summary>The cell's labels, one for each of the grouping's fields.</summary>
    public string[] Labels(int cell)
    {
        string[] labels = new string[Fields.Count];
        for (int i = 0; i < labels.Length; i++)
        {
            labels[i] = Fields[i].Label(CodeOf(cell, i));
        }

        return labels;
    }
}
