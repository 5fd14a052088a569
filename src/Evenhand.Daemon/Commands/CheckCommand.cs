using System.CommandLine;
using System.Text.Json.Nodes;
using Evenhand.Daemon.Hosting;
using Evenhand.Monitoring.Charters;
using Microsoft.Extensions.DependencyInjection;

namespace Evenhand.Daemon.Commands;

/// <summary><c>evenhand check</c>: validates charters.</summary>
internal sealed class CheckCommand
{
    private readonly Argument<string[]> _charters = new("CHARTER") { Arity = ArgumentArity.OneOrMore, Description = "The charter files." };
    private readonly Option<bool> _json = new("--json") { Description = "Print one JSON document instead of lines." };
    private readonly Terminal _terminal;

    private CheckCommand(Terminal terminal) => _terminal = terminal;

    /// <summary>The command.</summary>
    public static Command Create(IServiceProvider services)
    {
        CheckCommand check = new(services.GetRequiredService<Terminal>());
        Command command = new("check", "Validates charters; every problem on a line FILE:LINE:COLUMN: key: what is wrong; how to mend it.");
        command.Arguments.Add(check._charters);
        command.Options.Add(check._json);
        command.SetAction(check.Run);
        return command;
    }

    private int Run(ParseResult parsed)
    {
        List<(string File, IReadOnlyList<CharterProblem> Problems)> results = [];
        List<string> unreadable = [];
        foreach (string file in parsed.GetRequiredValue(_charters))
        {
            try
            {
                results.Add((file, CharterFile.Read(file, CharterUse.Monitoring).Problems));
            }
            catch (CommandFailure failure)
            {
                unreadable.Add(failure.Message);
            }
        }

        Print(results, parsed.GetValue(_json));
        foreach (string message in unreadable)
        {
            _terminal.Error.WriteLine($"evenhand: {message}");
        }

        return unreadable.Count > 0 || results.Exists(r => r.Problems.Count > 0) ? 2 : 0;
    }

    private void Print(List<(string File, IReadOnlyList<CharterProblem> Problems)> results, bool asJson)
    {
        if (asJson)
        {
            JsonArray files = [.. results.Select(r => (JsonNode)new JsonObject
            {
                ["file"] = r.File,
                ["ok"] = r.Problems.Count == 0,
                ["problems"] = new JsonArray([.. r.Problems.Select(p => (JsonNode)Problem(p))]),
            })];
            _terminal.Out.WriteLine(new JsonObject { ["files"] = files }.ToJsonString());
            return;
        }

        foreach ((string file, IReadOnlyList<CharterProblem> problems) in results)
        {
            foreach (CharterProblem problem in problems)
            {
                _terminal.Out.WriteLine(problem);
            }

            if (problems.Count == 0)
            {
                _terminal.Out.WriteLine($"{file}: ok");
            }
        }
    }

    private static JsonObject Problem(CharterProblem problem) => new JsonObject
    {
        ["line"] = problem.Line,
        ["column"] = problem.Column,
        ["key"] = problem.Key,
        ["message"] = problem.Message,
    };
}
