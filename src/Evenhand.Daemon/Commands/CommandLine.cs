using System.CommandLine;
using System.CommandLine.Parsing;
using Evenhand.Daemon.Hosting;
using Evenhand.Daemon.Sources;
using Evenhand.Daemon.Stores;
using Evenhand.Monitoring.Windows;
using Microsoft.Extensions.DependencyInjection;
using Microsoft.Extensions.Logging;

namespace Evenhand.Daemon.Commands;

/// <summary>The program's commands, and what their failures come to: an exit status and one line on stderr.</summary>
internal sealed partial class CommandLine(IServiceProvider services)
{
    private readonly Terminal _terminal = services.GetRequiredService<Terminal>();
    private readonly ILogger<CommandLine> _log = services.GetRequiredService<ILogger<CommandLine>>();

    /// <summary>Every command.</summary>
    public RootCommand Root()
    {
        RootCommand root = new("Watches the decisions that an automated system makes about people: rates, gaps, what is certain and what is not, with evidence that anyone can verify.");
        root.Subcommands.Add(CheckCommand.Create(services));
        root.Subcommands.Add(ReplayCommand.Create(services));
        root.Subcommands.Add(LearnCommand.Create(services));
        root.Subcommands.Add(AskCommand.Create(services));
        root.Subcommands.Add(EvidenceCommand.Create(services));
        root.Subcommands.Add(SchemaCommand.Create(services));
        return root;
    }

    /// <summary>Runs one command line.</summary>
    /// <returns>0 done; 1 found something wrong; 2 bad usage or bad input; 3 the environment failed.</returns>
    public int Run(string[] args)
    {
        ParseResult parsed = Root().Parse(args);
        if (parsed.Errors.Count > 0 && parsed.Action is not System.CommandLine.Help.HelpAction)
        {
            // An unknown word says more than the command that is missing because of it; a failure is one line.
            string problem = parsed.UnmatchedTokens.Count > 0 && parsed.CommandResult.Command is RootCommand
                ? $"{parsed.UnmatchedTokens[0]} is no command"
                : parsed.Errors[0].Message.ReplaceLineEndings(" ").Replace("\t", "", StringComparison.Ordinal).TrimEnd('.', ' ');
            return Fail(2, $"{problem}; see {PathOf(parsed.CommandResult)} --help");
        }

        try
        {
            return parsed.Invoke(new InvocationConfiguration { Output = _terminal.Out, Error = _terminal.Error, EnableDefaultExceptionHandler = false });
        }
        catch (Exception e)
        {
            LogFailure(_log, e);
            return Fail(e);
        }
    }

    private static string PathOf(CommandResult command) =>
        command.Command is RootCommand ? "evenhand" : command.Parent is CommandResult above ? $"{PathOf(above)} {command.Command.Name}" : command.Command.Name;

    private int Fail(Exception e) => e switch
    {
        CommandFailure { IsPlaced: true } failure => FailAsIs(failure),
        CommandFailure failure => Fail(failure.ExitCode, failure.Message),
        SourceException => Fail(2, e.Message),
        StoreException or StoredStateException => Fail(3, e.Message),
        AggregateException { InnerExceptions: [Exception only] } => Fail(only),
        IOException or UnauthorizedAccessException => Fail(3, e.Message),
        _ => Fail(3, $"failed unexpectedly: {e.GetType().Name}: {e.Message.ReplaceLineEndings(" ")}; EVENHAND_LOG=debug shows where, please report it"),
    };

    private int FailAsIs(CommandFailure failure)
    {
        _terminal.Error.WriteLine(failure.Message);
        return failure.ExitCode;
    }

    private int Fail(int exitCode, string message)
    {
        _terminal.Error.WriteLine($"evenhand: {message}");
        return exitCode;
    }

    [LoggerMessage(EventId = 1, Level = LogLevel.Debug, Message = "The command failed")]
    private static partial void LogFailure(ILogger logger, Exception exception);
}
