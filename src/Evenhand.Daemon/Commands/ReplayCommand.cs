using System.CommandLine;
using System.Security.Cryptography;
using System.Text;
using System.Text.Json.Nodes;
using Evenhand.Daemon.Hosting;
using Evenhand.Daemon.Replay;
using Evenhand.Daemon.Stores;
using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Records;
using Microsoft.Extensions.DependencyInjection;

namespace Evenhand.Daemon.Commands;

/// <summary><c>evenhand replay</c>: the whole pipeline over files.</summary>
internal sealed class ReplayCommand
{
    private readonly Argument<string> _charter = new("CHARTER") { Description = "The charter file." };
    private readonly Argument<string[]> _inputs = new("INPUT")
    {
        Arity = ArgumentArity.OneOrMore,
        Description = "Decisions: NDJSON, CSV or Parquet, each also compressed by gzip; - is stdin.",
    };

    private readonly Option<string?> _out = new("--out") { HelpName = "FILE", Description = "Write the snapshot document here." };
    private readonly Option<string?> _asOf = new("--as-of") { HelpName = "TIME", Description = "RFC 3339: records at or after it are left out. Default: the end of the minute of the latest event time." };
    private readonly Option<string?> _store = new("--store") { HelpName = "URL", Description = "Keep the run here, as sqlite:FILE: an unfinished run goes on, a finished one is printed again." };
    private readonly Option<string?> _outcomes = new("--outcomes") { HelpName = "FILE", Description = "Outcomes apart from their decisions, joined by id." };
    private readonly Option<string?> _signingKey = new("--signing-key") { HelpName = "FILE", Description = "Sign the snapshot with this ECDSA P-256 key (PEM)." };
    private readonly Option<int> _batchSize = new("--batch-size") { HelpName = "N", Description = "Records handled at a time; changes no result.", DefaultValueFactory = _ => 4096 };
    private readonly Option<int> _commitEvery = new("--commit-every") { HelpName = "N", Description = "With --store: records between two commits, at most; changes no result.", DefaultValueFactory = _ => 65536 };
    private readonly Option<bool> _failOnAlert = new("--fail-on-alert") { Description = "Exit with status 1 when an alert is open." };
    private readonly Option<bool> _json = new("--json") { Description = "Print the snapshot document instead of tables." };
    private readonly Terminal _terminal;
    private readonly TimeProvider _clock;

    private ReplayCommand(IServiceProvider services)
    {
        _terminal = services.GetRequiredService<Terminal>();
        _clock = services.GetRequiredService<TimeProvider>();
    }

    /// <summary>The command.</summary>
    public static Command Create(IServiceProvider services)
    {
        ReplayCommand replay = new(services);
        Command command = new("replay", "Runs the whole pipeline over files in event time and states what it found.");
        command.Arguments.Add(replay._charter);
        command.Arguments.Add(replay._inputs);
        foreach (Option option in (Option[])[replay._out, replay._asOf, replay._store, replay._outcomes, replay._signingKey, replay._batchSize, replay._commitEvery, replay._failOnAlert, replay._json])
        {
            command.Options.Add(option);
        }

        command.SetAction(replay.Run);
        return command;
    }

    private int Run(ParseResult parsed)
    {
        Charter charter = CharterFile.Load(parsed.GetRequiredValue(_charter), CharterUse.Monitoring);
        using ECDsa? key = SigningKey(parsed.GetValue(_signingKey));
        ReplayRequest request = new()
        {
            Charter = parsed.GetRequiredValue(_charter),
            Inputs = parsed.GetRequiredValue(_inputs),
            AsOf = AsOf(parsed.GetValue(_asOf)),
            Store = parsed.GetValue(_store),
            Outcomes = parsed.GetValue(_outcomes),
            SigningKey = key,
            BatchSize = Math.Min(AtLeastOne(_batchSize, parsed), AtLeastOne(_commitEvery, parsed)),
            CommitEvery = AtLeastOne(_commitEvery, parsed),
        };
        Check(charter, request);
        string?[] inUse =
        [
            request.Charter, .. request.Inputs, request.Outcomes, LabelsFile.PathOf(request.Charter, charter.LabelFeed?.File),
            parsed.GetValue(_signingKey), .. StoreOption.FilesOf(request.Store),
        ];
        using OutputFile? file = parsed.GetValue(_out) is { } path ? OutputFile.Open("--out", path, inUse) : null;
        ReplayResult result = Replay(charter, request);
        foreach (string remark in result.Remarks)
        {
            _terminal.Error.WriteLine($"evenhand: {remark}");
        }

        file?.Stream.Write(result.Snapshot.Bytes);
        file?.Complete();

        JsonObject document = JsonNode.Parse(result.Snapshot.Bytes)!.AsObject();
        Print(result.Snapshot.Bytes, document, parsed.GetValue(_json));
        return parsed.GetValue(_failOnAlert) && document["alerts"]!.AsArray().Count > 0 ? 1 : 0;
    }

    private ReplayResult Replay(Charter charter, ReplayRequest request)
    {
        using ReplayProgress? progress = _terminal.ShowsProgress ? new ReplayProgress(_terminal.Error, _clock) : null;
        ReplayRun run;
        try
        {
            run = new ReplayRun(charter, request, _clock, progress);
        }
        catch (ArgumentException e)
        {
            throw new CommandFailure(2, e.Message);
        }

        if (request.Store is null)
        {
            return run.RunAlone();
        }

        using IStore store = StoreOption.Open(request.Store);
        return run.RunIn(store);
    }

    private static void Check(Charter charter, ReplayRequest request)
    {
        if (charter.Time is null && request.AsOf is null)
        {
            throw new CommandFailure(2, "the charter has no `time`: say with --as-of which instant the records stand for");
        }

        if (request.Outcomes is not null && (charter.Outcome is null || charter.RecordId is null))
        {
            throw new CommandFailure(2, "--outcomes joins by id: the charter needs `outcome` and `id`");
        }

        if (request.Store is not null && (request.Inputs.Contains("-") || request.Outcomes == "-"))
        {
            throw new CommandFailure(2, "- (stdin) cannot be read again, which --store needs: write it to a file first");
        }

        if (request.Inputs.FirstOrDefault(i => i.StartsWith("--", StringComparison.Ordinal) && !File.Exists(i)) is { } option)
        {
            throw new CommandFailure(2, $"{option}: no such option, nor a file; see evenhand replay --help");
        }

        if (request.Inputs.Count(i => i == "-") + (request.Outcomes == "-" ? 1 : 0) > 1)
        {
            throw new CommandFailure(2, "- (stdin) can be read only once");
        }

        if (charter.LabelFeed?.Topic is { } topic)
        {
            throw new CommandFailure(2, $"the charter takes group labels from the topic {topic}, which replay does not read: write them to a file and name it under labels: file");
        }
    }

    private static int AtLeastOne(Option<int> option, ParseResult parsed) => parsed.GetValue(option) is var value && value is >= 1 and <= 1 << 20
        ? value
        : throw new CommandFailure(2, $"{option.Name} {value}: give a whole number from 1 to {1 << 20}");

    private static long? AsOf(string? text)
    {
        if (text is null)
        {
            return null;
        }

        return TimeParser.TryParseRfc3339(Encoding.UTF8.GetBytes(text), out long asOf) && EventTimeRange.Contains(asOf)
            ? asOf
            : throw new CommandFailure(2, $"--as-of {text}: not a time by RFC 3339 in the years 1000 to 8999; write it such as 2031-04-01T06:00:00Z");
    }

    private static ECDsa? SigningKey(string? file)
    {
        if (file is null)
        {
            return null;
        }

        ECDsa key = ECDsa.Create();
        try
        {
            key.ImportFromPem(File.ReadAllText(file));

            // A public key alone is read as well, and fails only here.
            key.SignHash(new byte[32]);
            return key.KeySize == 256 ? key : throw new CommandFailure(2, $"{file}: a key of {key.KeySize} bits; sign with one on the curve P-256");
        }
        catch (Exception e) when (e is IOException or UnauthorizedAccessException or ArgumentException or CryptographicException)
        {
            throw new CommandFailure(2, $"{file}: not a readable ECDSA private key in PEM; make one with: openssl ecparam -genkey -name prime256v1 -noout");
        }
    }

    private void Print(byte[] bytes, JsonObject document, bool asJson)
    {
        if (!asJson)
        {
            SnapshotTable.Write(document, _terminal.Out);
            return;
        }

        using Stream stdout = _terminal.OpenOut();
        stdout.Write(bytes);
        stdout.Write("\n"u8);
    }
}
