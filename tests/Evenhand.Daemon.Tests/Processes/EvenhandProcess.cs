using System.Diagnostics;

namespace Evenhand.Daemon.Tests.Processes;

/// <summary>The built program as a process of its own: the one place where tests start it.</summary>
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

    /// <summary>The exit status of a program that has ended.</summary>
    public int ExitCode => _process.ExitCode;

    /// <summary>Starts a command.</summary>
    public static EvenhandProcess Start(params IEnumerable<string> arguments) => Start(Dotnet(), [Assembly, .. arguments]);

    /// <summary>Starts a command that may make no file larger than this: writing beyond fails as on a disk that fails.</summary>
    /// <remarks>Needs a POSIX shell. The runtime itself maps a large file for code unless told not to.</remarks>
    public static EvenhandProcess StartWithFileLimit(int kibibytes, params IEnumerable<string> arguments) => Start(
        "/bin/sh",
        ["-c", $"trap '' XFSZ; ulimit -f {kibibytes * 2}; exec \"$@\"", "sh", Dotnet(), Assembly, .. arguments],
        ("DOTNET_EnableWriteXorExecute", "0"));

    /// <summary>Sends a text to stdin, closes it and waits for the end.</summary>
    public ProgramRun Finish(string? stdin = null)
    {
        try
        {
            _process.StandardInput.Write(stdin);
            _process.StandardInput.Close();
        }
        catch (IOException)
        {
            // It ended without reading all of it; what it says is looked at below.
        }

        _process.WaitForExit();
        return new ProgramRun(_process.ExitCode, _out.GetAwaiter().GetResult(), _error.GetAwaiter().GetResult());
    }

    /// <summary>Waits a while; says whether the program has ended by itself.</summary>
    public bool Ends(TimeSpan within) => _process.WaitForExit(within);

    /// <summary>Kills it as the system would: no handler runs, nothing is flushed.</summary>
    public void Kill()
    {
        _process.Kill();
        _process.WaitForExit();
    }

    public void Dispose() => _process.Dispose();

    private static string Assembly => Path.Combine(AppContext.BaseDirectory, "evenhand.dll");

    private static string Dotnet() => Environment.GetEnvironmentVariable("DOTNET_HOST_PATH") ?? "dotnet";

    private static EvenhandProcess Start(string file, string[] arguments, params ReadOnlySpan<(string Name, string Value)> environment)
    {
        ProcessStartInfo start = new(file, arguments) { RedirectStandardInput = true, RedirectStandardOutput = true, RedirectStandardError = true };
        foreach ((string name, string value) in environment)
        {
            start.Environment[name] = value;
        }

        return new EvenhandProcess(Process.Start(start)!);
    }
}
