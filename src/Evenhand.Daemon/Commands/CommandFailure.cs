namespace Evenhand.Daemon.Commands;

/// <summary>Ends a command with an exit status and one line that a person can act on.</summary>
/// <param name="exitCode">1: found something wrong; 2: bad usage or bad input; 3: the environment failed.</param>
/// <param name="message">What is wrong and how to mend it.</param>
/// <param name="isPlaced">Whether each line of the message begins with its place in a file, which is then printed as it is.</param>
internal sealed class CommandFailure(int exitCode, string message, bool isPlaced = false) : Exception(message)
{
    /// <summary>The exit status.</summary>
    public int ExitCode { get; } = exitCode;

    /// <summary>Whether each line of the message begins with its place in a file.</summary>
    public bool IsPlaced { get; } = isPlaced;
}
