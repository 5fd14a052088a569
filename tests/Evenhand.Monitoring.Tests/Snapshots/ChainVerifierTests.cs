using System.Security.Cryptography;
using System.Text;
using System.Text.Json.Nodes;
using Evenhand.Monitoring.Snapshots;
using Xunit;

namespace Evenhand.Monitoring.Tests.Snapshots;

/// <summary>Whatever is done to an exported chain is found; an untouched one, with or without states, verifies.</summary>
public sealed class ChainVerifierTests
{
    private static readonly ECDsa Key = ECDsa.Create(ECCurve.NamedCurves.nistP256);
    private static readonly SealedSnapshot[] Chain = Build(4, Key);
    private static readonly byte[] Export = Join(Chain.Select(s => s.Bytes));

    [Fact]
    public void Verify_UntouchedChain_IsIntact()
    {
        ChainReport report = ChainVerifier.Verify(Export, Chain[^1].Sha256, Key);
        Assert.True(report.Intact, string.Join('\n', report.Faults));
        Assert.Equal(4, report.Verified);
        Assert.Equal(Chain[^1].Sha256, report.Head);
    }

    [Fact]
    public void Verify_WithoutStates_IsIntact() =>
        Assert.True(ChainVerifier.Verify(Join(Chain.Select(s => SnapshotSeal.WithoutState(s.Bytes))), Chain[^1].Sha256, Key).Intact);

    [Theory]
    [InlineData(0x01)]
    [InlineData(0x20)]
    [InlineData(0x80)]
    public void Verify_AnyByteFlipped_IsBroken(byte flip)
    {
        // The line end of the last line is the only byte that says nothing: a file may end without it.
        for (int i = 0; i < Export.Length - 1; i++)
        {
            byte[] damaged = [.. Export];
            damaged[i] ^= flip;
            Assert.False(ChainVerifier.Verify(damaged).Intact, $"byte {i}");
        }
    }

    [Fact]
    public void Verify_LinesMovedOrRespaced_AreBroken()
    {
        byte[][] lines = [.. Chain.Select(s => s.Bytes)];
        byte[] spaced = Encoding.UTF8.GetBytes(Encoding.UTF8.GetString(lines[1]).Replace("\":", "\": ", StringComparison.Ordinal));
        AssertBroken(2, lines[0], spaced, lines[2], lines[3]);
        AssertBroken(2, lines[0], lines[2], lines[3]);
        AssertBroken(2, lines[0], lines[2], lines[1], lines[3]);
        AssertBroken(2, lines[0], lines[1], lines[1], lines[2], lines[3]);
        AssertBroken(1, lines[1], lines[2], lines[3]);
        AssertBroken(2, lines[0], [], lines[1], lines[2], lines[3]);
        AssertBroken(2, lines[0], "{}"u8.ToArray(), lines[1], lines[2], lines[3]);
        AssertBroken(1, [.. "\uFEFF"u8, .. lines[0]], lines[1], lines[2], lines[3]);
        AssertBroken(1, [.. lines[0], (byte)'\r'], lines[1], lines[2], lines[3]);
    }

    [Fact]
    public void Verify_TailCut_ShowsWithTheHeadGiven()
    {
        byte[] cut = Join(Chain.Take(3).Select(s => s.Bytes));
        Assert.True(ChainVerifier.Verify(cut).Intact);
        ChainFault fault = Assert.Single(ChainVerifier.Verify(cut, Chain[^1].Sha256).Faults);
        Assert.Equal(3, fault.Sequence);
    }

    [Fact]
    public void Verify_EditedAndSealedAgain_BreaksAtTheNextOne()
    {
        JsonObject edited = JsonNode.Parse(Chain[1].Bytes)!.AsObject();
        edited["readings"] = new JsonArray(0.99);
        SealedSnapshot forged = SnapshotSeal.Seal(edited, 2, Chain[0].Sha256, Key);
        ChainReport report = ChainVerifier.Verify(Join([Chain[0].Bytes, forged.Bytes, Chain[2].Bytes, Chain[3].Bytes]));
        Assert.Contains(report.Faults, f => f.Sequence == 3);
    }

    [Fact]
    public void Verify_SignedByAnotherKey_IsBrokenWhereTheKeyIsTrusted()
    {
        using ECDsa other = ECDsa.Create(ECCurve.NamedCurves.nistP256);
        byte[] forged = Join(Build(2, other).Select(s => s.Bytes));
        Assert.True(ChainVerifier.Verify(forged).Intact);
        Assert.Equal(2, ChainVerifier.Verify(forged, trustedKey: Key).Faults.Count);
        Assert.False(ChainVerifier.Verify(Join(Build(2, null).Select(s => s.Bytes)), trustedKey: Key).Intact);
    }

    [Fact]
    public void Verify_SignatureTakenAway_IsBroken()
    {
        JsonObject document = JsonNode.Parse(Chain[0].Bytes)!.AsObject();
        document.Remove("signature");
        Assert.False(ChainVerifier.Verify(CanonicalJson.Serialize(document)).Intact);
    }

    private static void AssertBroken(long sequence, params byte[][] lines)
    {
        ChainReport report = ChainVerifier.Verify(Join(lines));
        Assert.False(report.Intact);
        Assert.Contains(report.Faults, f => f.Sequence == sequence || f.Line == sequence);
    }

    private static SealedSnapshot[] Build(int count, ECDsa? key)
    {
        List<SealedSnapshot> chain = [];
        for (int i = 1; i <= count; i++)
        {
            JsonObject document = new()
            {
                ["format"] = "evenhand-snapshot/1",
                ["kind"] = "replay",
                ["readings"] = new JsonArray(i / 7.0),
                ["state"] = new JsonObject { ["format"] = "evenhand-state/1", ["n"] = i },
            };
            chain.Add(SnapshotSeal.Seal(document, i, i == 1 ? SnapshotSeal.Genesis : chain[^1].Sha256, key));
        }

        return [.. chain];
    }

    private static byte[] Join(IEnumerable<byte[]> lines) => [.. lines.SelectMany(l => l.Append((byte)'\n'))];
}
