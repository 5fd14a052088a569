namespace Evenhand.Monitoring.Charters;

/// <summary>Collects the problems of one file.</summary>
/// <param name="file">The file's name.</param>
internal sealed class CharterProblems(string file)
{
    private readonly List<CharterProblem> _problems = [];

    /// <summary>How many there are so far.</summary>
    public int Count => _problems.Count;

    /// <summary>Adds a problem.</summary>
    public void Report(int line, int column, string key, string wrong, string mend) =>
        _problems.Add(new(file, line, column, key, $"{wrong}; {mend}"));

    /// <summary>The problems in the order of the file; those of one place in the order of discovery.</summary>
    public IReadOnlyList<CharterProblem> InFileOrder() =>
        [.. _problems.OrderBy(p => p.Line).ThenBy(p => p.Column).Distinct()];
}
