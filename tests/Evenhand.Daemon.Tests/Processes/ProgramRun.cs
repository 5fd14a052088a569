using System.Text.Json.Nodes;

namespace Evenhand.Daemon.Tests.Processes;

/// <summary>What a run of the program came to.</summary>
/// <param name="ExitCode">Its exit status.</param>
/// <param name="Out">What it printed.</param>
/// <param name="Error">Its diagnostics.</param>
internal sealed record ProgramRun(int ExitCode, string Out, string Error)
{
    /// <summary>The diagnostics by line.</summary>
    public string[] ErrorLines => Lines(Error);

    /// <summary>What it printed by line, blank lines left out.</summary>
    public string[] OutLines => Lines(Out);

    /// <summary>What it printed, read as one JSON document.</summary>
    public JsonObject Document => JsonNode.Parse(Out)!.AsObject();

    /// <summary>Runs <c>evenhand</c> to its end.</summary>
    public static ProgramRun Of(params IEnumerable<string> arguments)
    {
        using EvenhandProcess process = EvenhandProcess.Start(arguments);
        return process.Finish();
    }

    /// <summary>Runs <c>evenhand replay</c>.</summary>
    public static ProgramRun Replay(params IEnumerable<string> arguments) => Of(["replay", .. arguments]);

    /// <summary>Runs <c>evenhand replay</c> with a text on stdin.</summary>
    public static ProgramRun ReplayStdin(string stdin, params IEnumerable<string> arguments)
    {
        using EvenhandProcess process = EvenhandProcess.Start(["replay", .. arguments]);
        return process.Finish(stdin);
    }

    private static string[] Lines(string text) => text.Split('\n', StringSplitOptions.RemoveEmptyEntries | StringSplitOptions.TrimEntries);
}
