using System.Diagnostics;
using System.Security.Cryptography;
using System.Text;
using System.Text.Json.Nodes;
using Dapper;
using Evenhand.Daemon.Stores.Sqlite;
using Evenhand.Daemon.Tests.Processes;
using Evenhand.Monitoring.Snapshots;
using Microsoft.Data.Sqlite;

namespace Evenhand.Daemon.Tests.Evidence;

/// <summary><c>evidence verify</c>: whatever is done to a chain, in a file or in the store, is named by its sequence with exit status 1.</summary>
public sealed class EvidenceVerifyTests(EvidenceChain chain) : IClassFixture<EvidenceChain>
{
    /// <summary>What can be done to the lines of an export, and the sequence that breaks.</summary>
    private static readonly Dictionary<string, (Func<byte[][], IEnumerable<byte[]>> Do, int Sequence)> Damages = new()
    {
        ["a reading flipped"] = (d => [d[0], EvidenceChain.Changed(d[1], "\"value\":0.", "\"value\":1."), d[2], d[3]], 2),
        ["the state flipped"] = (d => [d[0], d[1], EvidenceChain.Changed(d[2], "\"favourable\":1", "\"favourable\":2"), d[3]], 3),
        ["the signature flipped"] = (d => [d[0], d[1], d[2], SignedOtherwise(d[3])], 4),
        ["the charter flipped"] = (d => [EvidenceChain.Changed(d[0], "below: 0.8", "below: 0.7"), d[1], d[2], d[3]], 1),
        ["a space put in"] = (d => [d[0], d[1], EvidenceChain.Changed(d[2], ":", ": "), d[3]], 3),
        ["the line end of Windows"] = (d => [d[0], [.. d[1], (byte)'\r'], d[2], d[3]], 2),
        ["keys in another order"] = (d => [d[0], d[1], d[2], Encoding.UTF8.GetBytes(new JsonObject(EvidenceChain.Json(d[3]).Reverse().Select(p => KeyValuePair.Create(p.Key, p.Value?.DeepClone()))).ToJsonString())], 4),
        ["one dropped"] = (d => [d[0], d[2], d[3]], 3),
        ["the first dropped"] = (d => [d[1], d[2], d[3]], 2),
        ["two swapped"] = (d => [d[0], d[2], d[1], d[3]], 2),
        ["one doubled"] = (d => [d[0], d[1], d[1], d[2], d[3]], 2),
        ["another put in"] = (d => [d[0], d[1], Sealed(3), d[2], d[3]], 3),
        ["a blank line put in"] = (d => [d[0], d[1], [], d[2], d[3]], 3),
        ["one sealed anew with another reading"] = (d => [d[0], Resealed(d[1], d[0]), d[2], d[3]], 3),
        ["cut in the middle of a line"] = (d => [d[0], d[1], d[2][..(d[2].Length / 2)]], 3),
    };

    public static TheoryData<string> Names() => [.. Damages.Keys];

    [Fact]
    public void Verify_OfASoundChain_SaysHowManyAndTheHead()
    {
        string head = chain.Heads[^1];
        Assert.Equal($"{chain.Store}: 4 snapshots verified, head {head}\n", Verified("--store", chain.Store).Out);
        Assert.Equal($"{chain.File}: 4 snapshots verified, head {head}\n", Verified(chain.File, "--head", head.ToUpperInvariant(), "--public-key", chain.PublicKey).Out);
        Assert.Equal($$"""{"intact":true,"verified":4,"head":"{{head}}","faults":[]}""" + "\n", Verified("--store", chain.Store, "--head", head, "--json").Out);
        string one = chain.Write("one.ndjson", chain.Documents[..1]);
        Assert.Equal($"{one}: 1 snapshot verified, head {chain.Heads[0]}\n", Verified(one).Out);
    }

    [Theory]
    [MemberData(nameof(Names))]
    public void Verify_OfADamagedExport_NamesTheSequence(string damage)
    {
        (Func<byte[][], IEnumerable<byte[]>> act, int sequence) = Damages[damage];
        Broken(sequence, chain.Write("damaged.ndjson", act(chain.Documents)));
    }

    /// <summary>A verifier in another language that shares no code with the program; it knows no signatures.</summary>
    [Fact]
    public void Verify_ByAnotherProgram_ComesToTheSame()
    {
        string stateless = chain.Write("stateless.ndjson", chain.Documents.Select(d => SnapshotSeal.WithoutState(d)));
        Assert.All([chain.File, stateless], file => Assert.Equal(0, OtherVerifier(file, chain.Heads[^1])));
        Assert.Equal(1, OtherVerifier(chain.Write("other-cut.ndjson", chain.Documents[..3]), chain.Heads[^1]));
        foreach ((string damage, (Func<byte[][], IEnumerable<byte[]>> act, _)) in Damages.Where(d => d.Key != "the signature flipped"))
        {
            Assert.True(OtherVerifier(chain.Write("other-damaged.ndjson", act(chain.Documents))) == 1, damage);
        }
    }

    [Fact]
    public void Verify_OfACutTail_IsSoundUnlessTheHeadIsGiven()
    {
        string cut = chain.Write("cut.ndjson", chain.Documents[..3]);
        Assert.Equal($"{cut}: 3 snapshots verified, head {chain.Heads[2]}\n", Verified(cut).Out);
        string named = Broken(3, cut, "--head", chain.Heads[^1]);
        Assert.Contains("snapshots were cut off after it", named, StringComparison.Ordinal);
        string older = Broken(2, chain.File, "--head", chain.Heads[1]);
        Assert.Contains("later snapshots were added", older, StringComparison.Ordinal);
        Broken(4, "--store", chain.Store, "--head", new string('7', 64));
    }

    [Fact]
    public void Verify_WithAKeyThatDidNotSign_NamesEverySnapshot()
    {
        using ECDsa other = ECDsa.Create(ECCurve.NamedCurves.nistP256);
        File.WriteAllText(chain.At("other.pem"), other.ExportSubjectPublicKeyInfoPem());
        ProgramRun run = Run("--store", chain.Store, "--public-key", chain.At("other.pem"));
        Assert.Equal(1, run.ExitCode);
        Assert.Equal(EvidenceChain.Count + 1, run.OutLines.Length);
        Assert.All(Enumerable.Range(1, EvidenceChain.Count), i => Assert.StartsWith($"Snapshot {i} (line {i}): ", run.OutLines[i - 1], StringComparison.Ordinal));
    }

    [Fact]
    public void Verify_WithAHeadOrAKeyThatIsNone_IsBadUsage()
    {
        Fails("64 hexadecimal digits", chain.File, "--head", "abc");
        Fails("not a readable ECDSA key", chain.File, "--public-key", chain.File);
        Fails("not a readable ECDSA key", chain.File, "--public-key", chain.At("nothing.pem"));
    }

    [Theory]
    [InlineData("snapshot_no_update", "UPDATE snapshot SET document = CAST(replace(CAST(document AS TEXT), 'fast_track', 'slow_track') AS BLOB) WHERE sequence = 2", "Snapshot 2 (line 2)")]
    [InlineData("snapshot_no_update", "UPDATE snapshot SET document = CAST('[7]' AS BLOB) WHERE sequence = 3", "snapshot 3 is due")]
    [InlineData("snapshot_no_update", "UPDATE snapshot SET document = CAST('{\"charter\":1,\"kind\":[]}' AS BLOB) WHERE sequence = 3", "Snapshot 3 (line 3)")]
    [InlineData("snapshot_no_update", "UPDATE snapshot SET as_of = '2030-01-01T00:00:00Z' WHERE sequence = 1", "sequence 1: the column as_of")]
    [InlineData("snapshot_no_delete", "DELETE FROM snapshot WHERE sequence = 2", "Snapshot 3 (line 2): snapshot 2 is missing before it")]
    [InlineData("snapshot_no_delete", "DELETE FROM snapshot WHERE sequence = 4", "head names sequence 4, the last snapshot is 3")]
    public void Verify_OfAStoreChangedPastItsGuards_NamesTheSequenceAndTheGuard(string guard, string sql, string named)
    {
        string file = chain.CopyStore("tampered.db");
        using (SqliteConnection connection = SqliteConnections.Writer(file))
        {
            connection.Execute($"PRAGMA foreign_keys = OFF; DROP TRIGGER {guard}; {sql}");
        }

        ProgramRun run = Run("--store", $"sqlite:{file}");

        Assert.Equal((1, ""), (run.ExitCode, run.Error));
        Assert.Contains(named, run.Out, StringComparison.Ordinal);
        Assert.Contains(run.OutLines, l => l.Contains($"guard {guard} is gone", StringComparison.Ordinal));
        Assert.Equal($"sqlite:{file}: the chain is broken", run.OutLines[^1]);
    }

    private static byte[] SignedOtherwise(byte[] document)
    {
        string signature = (string)EvidenceChain.Json(document)["signature"]!;
        return EvidenceChain.Changed(document, signature, (signature[0] == 'A' ? 'B' : 'A') + signature[1..]);
    }

    private static byte[] Sealed(long sequence) =>
        SnapshotSeal.Seal(new JsonObject { ["kind"] = "replay" }, sequence, new string('3', 64)).Bytes;

    private static byte[] Resealed(byte[] document, byte[] before)
    {
        JsonObject edited = EvidenceChain.Json(document);
        edited["readings"]!.AsArray().RemoveAt(0);
        return SnapshotSeal.Seal(edited, 2, (string)EvidenceChain.Json(before)["sha256"]!).Bytes;
    }

    private static int OtherVerifier(params string[] args)
    {
        ProcessStartInfo start = new("python3", [Path.Combine(AppContext.BaseDirectory, "tools", "verify_chain.py"), .. args])
        {
            RedirectStandardOutput = true,
            RedirectStandardError = true,
        };
        using Process process = Process.Start(start)!;
        Task<string> error = process.StandardError.ReadToEndAsync();
        process.StandardOutput.ReadToEnd();
        process.WaitForExit();
        Assert.Equal("", error.GetAwaiter().GetResult());
        return process.ExitCode;
    }

    private static ProgramRun Run(params string[] args) => ProgramRun.Of(["evidence", "verify", .. args]);

    private static ProgramRun Verified(params string[] args)
    {
        ProgramRun run = Run(args);
        Assert.Equal((0, ""), (run.ExitCode, run.Error));
        return run;
    }

    /// <summary>Both forms name the sequence in their first fault and say the same.</summary>
    private static string Broken(int sequence, params string[] args)
    {
        ProgramRun text = Run(args), json = Run([.. args, "--json"]);
        Assert.Equal((1, "", 1, ""), (text.ExitCode, text.Error, json.ExitCode, json.Error));
        Assert.Matches($@"[Ss]napshot {sequence}\b", text.OutLines[0]);
        Assert.EndsWith(": the chain is broken", text.OutLines[^1], StringComparison.Ordinal);
        Assert.False((bool)json.Document["intact"]!);
        Assert.Equal(text.OutLines[..^1], json.Document["faults"]!.AsArray().Select(f => (string)f!));
        return text.OutLines[0];
    }

    private static void Fails(string saying, params string[] args)
    {
        ProgramRun run = Run(args);
        Assert.Equal((2, ""), (run.ExitCode, run.Out));
        Assert.Contains(saying, Assert.Single(run.ErrorLines), StringComparison.Ordinal);
    }
}
