using System.Diagnostics;

namespace Evenhand.Daemon.Tests.Processes;

/// <summary>The program as a process of its own, so that it can be killed.</summary>
internal sealed class EvenhandProcess : IDisposable
{
    private readonly Process _process;
    private readonly Task<string> _out;
    private readonly Task<string> _error;

    private EvenhandProcess(Process process)
    {
        _process = process;
        _out = process.StandardOutput.ReadToEndAsync();
        _error = process.StandardError.ReadToEndAsync();
    }

    /// <summary>Starts a command.</summary>
    public static EvenhandProcess Start(params IEnumerable<string> arguments)
    {
        ProcessStartInfo start = new("dotnet") { RedirectStandardOutput = true, RedirectStandardError = true, RedirectStandardInput = true };
        start.ArgumentList.Add(Path.Combine(AppContext.BaseDirectory, "evenhand.dll"));
        foreach (string argument in arguments)
        {
            start.ArgumentList.Add(argument);
        }

        return new EvenhandProcess(Process.Start(start)!);
    }

    /// <summary>Runs a command to its end.</summary>
    public static (int ExitCode, string Out, string Error) Run(params IEnumerable<string> arguments)
    {
        using EvenhandProcess process = Start(arguments);
        process._process.StandardInput.Close();
        process._process.WaitForExit();
        return (process._process.ExitCode, process._out.Result, process._error.Result);
    }

    /// <summary>Waits a while; says whether the program has ended by itself.</summary>
    public bool Ends(TimeSpan within) => _process.WaitForExit(within);

    /// <summary>The exit status of a program that has ended.</summary>
    public int ExitCode => _process.ExitCode;

    /// <summary>Kills it as the system would: no handler runs, nothing is flushed.</summary>
    public void Kill()
    {
        _process.Kill();
        _process.WaitForExit();
    }

    public void Dispose() => _process.Dispose();
}
