using System.CommandLine;
using System.CommandLine.Parsing;
using System.Globalization;
using System.Security.Cryptography;
using System.Text.Json.Nodes;
using Evenhand.Daemon.Evidence;
using Evenhand.Daemon.Hosting;
using Evenhand.Monitoring.Snapshots;
using Microsoft.Extensions.DependencyInjection;

namespace Evenhand.Daemon.Commands;

/// <summary><c>evenhand evidence</c>: the chain of snapshots, in a store or an exported file.</summary>
internal sealed class EvidenceCommand
{
    private readonly Argument<long> _sequence = new("SEQ") { Description = "The snapshot's sequence.", CustomParser = Sequence };
    private readonly Argument<string?> _file = new("FILE") { Arity = ArgumentArity.ZeroOrOne, Description = "An exported chain, instead of a store." };
    private readonly Option<string?> _store = new("--store") { HelpName = "URL", Description = "The store, as sqlite:FILE." };
    private readonly Option<string?> _head = new("--head") { HelpName = "SHA256", Description = "The hash that the last snapshot must have, from wherever it was kept: shows a tail that was cut off." };
    private readonly Option<string?> _publicKey = new("--public-key") { HelpName = "FILE", Description = "Every snapshot must be signed with this key (PEM)." };
    private readonly Option<string?> _out = new("--out") { HelpName = "FILE", Description = "Write here instead of to stdout." };
    private readonly Option<bool> _withoutState = new("--without-state") { Description = "Leave states and circuits out; the chain still verifies." };
    private readonly Option<bool> _json = new("--json") { Description = "Print one JSON document." };
    private readonly Terminal _terminal;

    private EvidenceCommand(Terminal terminal) => _terminal = terminal;

    /// <summary>The command.</summary>
    public static Command Create(IServiceProvider services)
    {
        EvidenceCommand evidence = new(services.GetRequiredService<Terminal>());
        Command command = new("evidence", "Lists, shows, verifies, recomputes and exports the chain of snapshots.");
        command.Subcommands.Add(evidence.Sub("list", "Lists the snapshots.", evidence.List, evidence._file, evidence._json));
        command.Subcommands.Add(evidence.Sub("show", "Prints a snapshot: tables, or its document with --json.", evidence.Show, evidence._sequence, evidence._file, evidence._json));
        command.Subcommands.Add(evidence.Sub("verify", "Checks the whole chain; status 1 names what breaks it.", evidence.Verify, evidence._file, evidence._head, evidence._publicKey, evidence._json));
        command.Subcommands.Add(evidence.Sub("recompute", "Derives a snapshot's readings again from the state that it carries and compares.", evidence.Recompute, evidence._sequence, evidence._file, evidence._json));
        command.Subcommands.Add(evidence.Sub("export", "Writes the chain, one stored document a line, byte for byte.", evidence.Export, evidence._file, evidence._out, evidence._withoutState));
        return command;
    }

    private Command Sub(string name, string description, Func<ParseResult, int> run, params Symbol[] symbols)
    {
        Command command = new(name, description);
        foreach (Symbol symbol in symbols.Append(_store))
        {
            if (symbol is Argument argument)
            {
                command.Arguments.Add(argument);
            }
            else
            {
                command.Options.Add((Option)symbol);
            }
        }

        command.SetAction(run);
        return command;
    }

    private IEvidenceSource Open(ParseResult parsed)
    {
        string? file = parsed.GetValue(_file), store = parsed.GetValue(_store);
        return (file, store) switch
        {
            (null, null) => throw new CommandFailure(2, "say where the chain is: --store sqlite:FILE, or an exported file"),
            (not null, not null) => throw new CommandFailure(2, "name a store or an exported file, not both"),
            (not null, _) => FileEvidence.Open(file),
            _ => new StoreEvidence(StoreOption.OpenReadOnly(store!), store!),
        };
    }

    private int List(ParseResult parsed)
    {
        using IEvidenceSource source = Open(parsed);
        JsonArray rows = [.. source.Documents().Select(bytes => EvidenceDocument.Read(source.Name, () => Row(bytes, source.Name)))];
        if (parsed.GetValue(_json))
        {
            _terminal.Out.WriteLine(new JsonObject { ["snapshots"] = rows }.ToJsonString());
            return 0;
        }

        if (rows.Count == 0)
        {
            _terminal.Out.WriteLine("The chain is empty.");
        }

        foreach (JsonNode? row in rows)
        {
            _terminal.Out.WriteLine(string.Create(
                CultureInfo.InvariantCulture,
                $"{row!["sequence"],6}  {row["kind"],-10} {row["charter"],-24} {row["as_of"],-22} {(int)row["bytes"]!,12:N0} bytes  {row["sha256"]}"));
        }

        return 0;
    }

    private static JsonObject Row(byte[] bytes, string name)
    {
        JsonObject document = EvidenceDocument.Parse(bytes, name);
        return new JsonObject
        {
            ["sequence"] = document["sequence"]?.DeepClone(),
            ["kind"] = document["kind"]?.DeepClone(),
            ["charter"] = document["charter"]?["id"]?.DeepClone(),
            ["as_of"] = document["as_of"]?.DeepClone(),
            ["created_at"] = document["created_at"]?.DeepClone(),
            ["sha256"] = document["sha256"]?.DeepClone(),
            ["bytes"] = bytes.Length,
        };
    }

    private int Show(ParseResult parsed)
    {
        using IEvidenceSource source = Open(parsed);
        byte[] bytes = Find(source, parsed.GetValue(_sequence));
        if (parsed.GetValue(_json))
        {
            using Stream stdout = _terminal.OpenOut();
            stdout.Write(bytes);
            stdout.Write("\n"u8);
        }
        else
        {
            _terminal.Out.Write(EvidenceDocument.Read(source.Name, () => Tables(bytes, source.Name)));
        }

        return 0;
    }

    private static string Tables(byte[] bytes, string name)
    {
        using StringWriter tables = new();
        Replay.SnapshotTable.Write(EvidenceDocument.Parse(bytes, name), tables);
        return tables.ToString();
    }

    private int Verify(ParseResult parsed)
    {
        using IEvidenceSource source = Open(parsed);
        using ECDsa? key = PublicKey(parsed.GetValue(_publicKey));
        using ChainVerifier verifier = Verifier(parsed.GetValue(_head), key);
        foreach (byte[] document in source.Documents())
        {
            verifier.Check(document);
        }

        ChainReport report = verifier.Complete();
        bool isEmptyStore = source is StoreEvidence && report.LastSequence is null && report.Faults.All(f => f.Kind == ChainFaultKind.Empty) && parsed.GetValue(_head) is null;
        string[] faults = [.. isEmptyStore ? [] : report.Faults.Select(f => f.Message), .. source.OtherFaults()];
        if (parsed.GetValue(_json))
        {
            _terminal.Out.WriteLine(new JsonObject
            {
                ["intact"] = faults.Length == 0,
                ["verified"] = report.Verified,
                ["head"] = report.Head,
                ["faults"] = new JsonArray([.. faults.Select(f => (JsonNode)f)]),
            }.ToJsonString());
        }
        else
        {
            foreach (string fault in faults)
            {
                _terminal.Out.WriteLine(fault);
            }

            _terminal.Out.WriteLine(faults.Length > 0 ? $"{source.Name}: the chain is broken"
                : isEmptyStore ? $"{source.Name}: the chain is empty"
                : $"{source.Name}: {report.Verified:N0} {(report.Verified == 1 ? "snapshot" : "snapshots")} verified, head {report.Head}");
        }

        return faults.Length == 0 ? 0 : 1;
    }

    private static ChainVerifier Verifier(string? head, ECDsa? key)
    {
        try
        {
            return new ChainVerifier(head, key);
        }
        catch (ArgumentException e)
        {
            throw new CommandFailure(2, $"--head {head}: {e.Message.Split(" (Parameter")[0]}");
        }
    }

    private int Recompute(ParseResult parsed)
    {
        using IEvidenceSource source = Open(parsed);
        JsonObject document = EvidenceDocument.Parse(Find(source, parsed.GetValue(_sequence)), source.Name);
        RecomputeReport report = EvidenceDocument.Recompute(document, source.Name);
        if (parsed.GetValue(_json))
        {
            _terminal.Out.WriteLine(new JsonObject
            {
                ["compared"] = report.Compared,
                ["not_recomputable"] = report.NotRecomputable,
                ["differences"] = new JsonArray([.. report.Differences.Select(d => (JsonNode)d)]),
            }.ToJsonString());
        }
        else
        {
            foreach (string difference in report.Differences)
            {
                _terminal.Out.WriteLine(difference);
            }

            string skipped = report.NotRecomputable == 0 ? "" : $"; {report.NotRecomputable:N0} rest on sums that the state withholds";
            _terminal.Out.WriteLine($"{report.Compared:N0} readings derived again, {report.Differences.Count:N0} differ{skipped}");
        }

        return report.Differences.Count == 0 ? 0 : 1;
    }

    private int Export(ParseResult parsed)
    {
        using IEvidenceSource source = Open(parsed);
        if (parsed.GetValue(_out) is { } path)
        {
            using OutputFile file = OutputFile.Open("--out", path, [parsed.GetValue(_file), .. StoreOption.FilesOf(parsed.GetValue(_store))]);
            Write(source, file.Stream, parsed.GetValue(_withoutState));
            file.Complete();
            return 0;
        }

        using Stream stdout = _terminal.OpenOut();
        Write(source, stdout, parsed.GetValue(_withoutState));
        return 0;
    }

    private static void Write(IEvidenceSource source, Stream to, bool withoutState)
    {
        foreach (byte[] document in source.Documents())
        {
            to.Write(withoutState ? EvidenceDocument.WithoutState(document, source.Name) : document);
            to.Write("\n"u8);
        }
    }

    private static byte[] Find(IEvidenceSource source, long sequence) =>
        source.Document(sequence) ?? throw new CommandFailure(2, $"{source.Name}: holds no snapshot {sequence}; evidence list shows which there are");

    private static long Sequence(ArgumentResult argument)
    {
        string text = argument.Tokens[0].Value;
        if (!long.TryParse(text, NumberStyles.None, CultureInfo.InvariantCulture, out long sequence))
        {
            argument.AddError($"SEQ '{text}': not a whole number from 1; evidence list shows which snapshots there are");
        }

        return sequence;
    }

    private static ECDsa? PublicKey(string? file)
    {
        if (file is null)
        {
            return null;
        }

        ECDsa key = ECDsa.Create();
        try
        {
            key.ImportFromPem(File.ReadAllText(file));
            return key;
        }
        catch (Exception e) when (e is IOException or UnauthorizedAccessException or ArgumentException or CryptographicException)
        {
            throw new CommandFailure(2, $"{file}: not a readable ECDSA key in PEM");
        }
    }
}
