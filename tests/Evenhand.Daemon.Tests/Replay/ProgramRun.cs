using System.Diagnostics;
using System.Text.Json.Nodes;

namespace Evenhand.Daemon.Tests.Replay;

/// <summary>One run of the program as a process of its own.</summary>
/// <param name="ExitCode">Its exit status.</param>
/// <param name="Out">What it printed.</param>
/// <param name="Error">Its diagnostics.</param>
internal sealed record ProgramRun(int ExitCode, string Out, string Error)
{
    /// <summary>The diagnostics by line.</summary>
    public string[] ErrorLines => Error.Split('\n', StringSplitOptions.RemoveEmptyEntries | StringSplitOptions.TrimEntries);

    /// <summary>What it printed, read as one JSON document.</summary>
    public JsonObject Document => JsonNode.Parse(Out)!.AsObject();

    /// <summary>Runs <c>evenhand replay</c>.</summary>
    public static ProgramRun Replay(params string[] args) => Start(null, ["replay", .. args]);

    /// <summary>Runs <c>evenhand replay</c> with a text on stdin.</summary>
    public static ProgramRun ReplayStdin(string stdin, params string[] args) => Start(stdin, ["replay", .. args]);

    private static ProgramRun Start(string? stdin, string[] args)
    {
        ProcessStartInfo start = new(Environment.GetEnvironmentVariable("DOTNET_HOST_PATH") ?? "dotnet")
        {
            RedirectStandardInput = true,
            RedirectStandardOutput = true,
            RedirectStandardError = true,
        };
        start.ArgumentList.Add(Path.Combine(AppContext.BaseDirectory, "evenhand.dll"));
        Array.ForEach(args, start.ArgumentList.Add);
        using Process process = Process.Start(start)!;
        Task<string> error = process.StandardError.ReadToEndAsync();
        process.StandardInput.Write(stdin);
        process.StandardInput.Close();
        string text = process.StandardOutput.ReadToEnd();
        process.WaitForExit();
        return new ProgramRun(process.ExitCode, text, error.GetAwaiter().GetResult());
    }
}
