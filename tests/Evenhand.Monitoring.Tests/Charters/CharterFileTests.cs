using CsCheck;
using Evenhand.Monitoring.Charters;
using Evenhand.Testing;
using Xunit;

namespace Evenhand.Monitoring.Tests.Charters;

/// <summary>Charters in files: the valid ones are accepted, each wrong one gives exactly the lines beside it.</summary>
public sealed class CharterFileTests
{
    public static TheoryData<string> Valid() => [.. Files("charters/valid")];

    public static TheoryData<string> Open() => [.. Files("charters/open")];

    public static TheoryData<string> Wrong() => [.. Files("charters/wrong")];

    [Theory]
    [MemberData(nameof(Valid))]
    public void Parse_ValidCharter_HasNoProblem(string file) => Assert.Empty(Parse("charters/valid", file).Problems);

    [Theory]
    [MemberData(nameof(Open))]
    public void Parse_CharterOfAnOpenDataSet_HasNoProblem(string file) => Assert.Empty(Parse("charters/open", file).Problems);

    [Theory]
    [MemberData(nameof(Wrong))]
    public void Parse_WrongCharter_GivesExactlyTheLinesBesideIt(string file)
    {
        CharterResult result = Parse("charters/wrong", file);
        string expected = File.ReadAllText(TestData.Path(Path.Combine("charters/wrong", Path.ChangeExtension(file, ".txt"))));

        Assert.Null(result.Charter);
        Assert.Equal(expected.TrimEnd(), string.Join('\n', result.Problems));
    }

    [Fact]
    public void WrongCharters_KindsOfMistake_AreAtLeastSixty() => Assert.True(Files("charters/wrong").Count() >= 60);

    [Fact]
    public void Parse_AnyDamageToAValidCharter_NeverThrows()
    {
        byte[][] texts = [.. Files("charters/valid").Select(f => File.ReadAllBytes(TestData.Path(Path.Combine("charters/valid", f))))];
        Gen.Select(Gen.Int[0, texts.Length - 1], Gen.Select(Gen.Int[0, 100_000], Gen.Byte, Gen.Int[0, 2]).Array[1, 6]).Sample(
            (text, edits) =>
            {
                List<byte> bytes = [.. texts[text]];
                foreach ((int at, byte value, int kind) in edits)
                {
                    int place = at % bytes.Count;
                    if (kind == 0)
                    {
                        bytes[place] = value;
                    }
                    else if (kind == 1)
                    {
                        bytes.Insert(place, value);
                    }
                    else if (bytes.Count > 1)
                    {
                        bytes.RemoveAt(place);
                    }
                }

                CharterResult result = CharterParser.Parse("damaged.yaml", bytes.ToArray());
                Assert.True(result.Charter is not null ^ result.Problems.Count > 0);
            },
            iter: 2000);
    }

    private static IEnumerable<string> Files(string folder) =>
        Directory.EnumerateFiles(TestData.Path(folder), "*.yaml").Select(f => Path.GetFileName(f)!).Order(StringComparer.Ordinal);

    private static CharterResult Parse(string folder, string file)
    {
        byte[] text = File.ReadAllBytes(TestData.Path(Path.Combine(folder, file)));
        CharterUse use = file.EndsWith(".learn.yaml", StringComparison.Ordinal) ? CharterUse.Learning : CharterUse.Monitoring;
        return CharterParser.Parse(file, text, use, name => !name.StartsWith("absent.", StringComparison.Ordinal));
    }
}
