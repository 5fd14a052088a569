namespace Evenhand.Monitoring.Charters;

/// <summary>One thing wrong with a charter file.</summary>
/// <param name="File">The file's name as it was given.</param>
/// <param name="Line">Line, from 1.</param>
/// <param name="Column">Column in UTF-16 code units, from 1.</param>
/// <param name="Key">The key concerned with its path, such as <c>groups[0].at</c>; list entries count from 0. <c>file</c> and <c>yaml</c> stand for the file as a whole and its notation.</param>
/// <param name="Message">What is wrong and, after a semicolon, how to mend it; one line.</param>
public sealed record CharterProblem(string File, int Line, int Column, string Key, string Message)
{
    /// <summary>The problem on one line: <c>FILE:LINE:COLUMN: key: what is wrong; how to mend it</c>.</summary>
    public override string ToString() => FormattableString.Invariant($"{File}:{Line}:{Column}: {Key}: {Message}");
}
