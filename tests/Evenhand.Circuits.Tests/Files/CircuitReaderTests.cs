using System.Text;
using Evenhand.Circuits.Files;
using Evenhand.Circuits.Structure;
using Evenhand.Circuits.Tests.Profiles;
using Evenhand.Circuits.Tests.Queries;
using Xunit;

namespace Evenhand.Circuits.Tests.Files;

/// <summary>Circuit files: what is written is read back, what is wrong is named.</summary>
public sealed class CircuitReaderTests
{
    private const string Variables = """[{"name":"a","kind":"category","values":["x","y"]},{"name":"n","kind":"number","edges":[0,1,2]},{"name":"c","kind":"number"}]""";

    /// <summary>One file a mistake, with its message.</summary>
    public static TheoryData<string, string> Wrong => new()
    {
        { "nonsense", "is not JSON at line 1, byte 2" },
        { "[]", "is no circuit file" },
        { """{"format":"other/1"}""", "is no circuit file" },
        { """{"format":"evenhand-circuit/1"}""", "the file needs variables, a list" },
        { """{"format":"evenhand-circuit/1","variables":[],"nodes":[]}""", "the file needs root, a number" },
        { """{"format":"evenhand-circuit/1","variables":[],"nodes":[],"root":1,"extra":2}""", "extra is no key of a circuit file" },
        { """{"format":"evenhand-circuit/1","variables":[],"nodes":[],"root":1}""", "the root 1 is not among the nodes" },
        { """{"format":"evenhand-circuit/1","variables":[],"nodes":[],"root":1.5}""", "root is 1.5, but ids of nodes are whole numbers" },
        { File("[3]"), "nodes holds 3, but each node is an object with an id" },
        { File("""[{"id":1,"variable":"a","p":[1,0]},{"id":1,"variable":"a","p":[1,0]}]"""), "node 1: stands twice" },
        { File("""[{"id":1,"variable":"b","p":[1,0]}]"""), "node 1: refers to the variable \"b\", which is not there" },
        { File("""[{"id":1,"variable":"a","p":[1]}]"""), "node 1: 1 probabilities for the 2 states of a" },
        { File("""[{"id":1,"variable":"a","p":[0.5,0.4]}]"""), "node 1: is not normalised: p add up to 0.9, not 1" },
        { File("""[{"id":1,"variable":"a","p":[1.5,-0.5]}]"""), "node 1: p holds -0.5, which is no probability" },
        { File("""[{"id":1,"variable":"a","p":["1","0"]}]"""), "node 1: p holds \"1\", which is no number" },
        { File("""[{"id":1,"variable":"a","mean":0,"sd":1}]"""), "node 1: a has values, so it takes p, not mean and sd" },
        { File("""[{"id":1,"variable":"n","mean":0,"sd":1}]"""), "node 1: n has edges, so it takes p, not mean and sd" },
        { File("""[{"id":1,"variable":"c","p":[1]}]"""), "node 1: c has neither values nor edges, so it takes mean and sd, not p" },
        { File("""[{"id":1,"variable":"c","mean":0,"sd":0}]"""), "node 1: sd is 0, but must be above 0" },
        { File("""[{"id":1,"variable":"c","mean":0}]"""), "node 1: needs sd, a number" },
        { File("""[{"id":1,"variable":"a","p":[1,0],"mean":0}]"""), "node 1: a leaf takes either p, or mean and sd" },
        { File("""[{"id":1,"variable":"a"}]"""), "node 1: a leaf takes either p, or mean and sd" },
        { File("""[{"id":1}]"""), "node 1: is to have one of variable, product and sum" },
        { File("""[{"id":1,"variable":"a","p":[1,0],"colour":1}]"""), "node 1: colour is no key of a node" },
        { File("""[{"id":1,"product":[]}]"""), "node 1: has no parts" },
        { File("""[{"id":1,"product":7}]"""), "node 1: its parts are no list" },
        { File("""[{"id":1,"product":["2"]}]"""), "node 1: its parts hold \"2\"" },
        { File("""[{"id":1,"product":[2]}]"""), "node 1: refers to node 2, which is not there" },
        { File("""[{"id":1,"product":[2]},{"id":2,"product":[1]}]"""), "node 1: is its own part: the circuit is cyclic" },
        { File("""[{"id":1,"sum":[2,3],"weights":[0.5,0.5]},{"id":2,"variable":"a","p":[1,0]},{"id":3,"variable":"n","p":[1,0]}]"""), "node 1: is not smooth: the variable a is in some of its parts and not in others" },
        { File("""[{"id":1,"product":[2,3]},{"id":2,"variable":"a","p":[1,0]},{"id":3,"variable":"a","p":[1,0]}]"""), "node 1: is not decomposable: two of its parts have the variable a" },
        { File("""[{"id":1,"sum":[2],"weights":[0.9]},{"id":2,"variable":"a","p":[1,0]}]"""), "node 1: is not normalised: weights add up to 0.9, not 1" },
        { File("""[{"id":1,"sum":[2],"weights":[0.5,0.5]},{"id":2,"variable":"a","p":[1,0]}]"""), "node 1: 2 weights for 1 parts" },
        { File("""[{"id":1,"sum":[2]},{"id":2,"variable":"a","p":[1,0]}]"""), "node 1: needs weights, a list of numbers" },
        { File("""[{"id":1,"variable":"a","p":[1,0]},{"id":9,"sum":[1],"weights":[2]}]"""), "node 9: is not normalised: weights add up to 2, not 1" },
        { File("[]", """[{"name":"a","kind":"colour"}]"""), "variable a: the kind colour is neither category nor number" },
        { File("[]", """[{"name":"a","kind":"category","values":[]}]"""), "variable a: has no values" },
        { File("[]", """[{"name":"a","kind":"category","values":["x","x"]}]"""), "variable a: the value x stands twice" },
        { File("[]", """[{"name":"a","kind":"number","edges":[1]}]"""), "variable a: needs two edges or more" },
        { File("[]", """[{"name":"a","kind":"number","edges":[2,1]}]"""), "variable a: edges must ascend" },
        { File("[]", """[{"name":"a","kind":"number","edges":[0,null,2]}]"""), "variable a: edges holds null between others" },
        { File("[]", """[{"name":"a","kind":"number","edges":[0,1],"centres":[1,2]}]"""), "variable a: has 1 bins but 2 centres" },
        { File("[]", """[{"name":"a","kind":"number"},{"name":"a","kind":"number"}]"""), "the variable a stands twice" },
        { """{"format":"evenhand-circuit/1","root":1,"root":2}""", "is not JSON" },
    };

    [Theory]
    [MemberData(nameof(Wrong))]
    public void Read_AWrongFile_NamesTheNodeAndTheReason(string json, string message)
    {
        CircuitException e = Assert.Throws<CircuitException>(() => Read(json));

        Assert.Contains(message, e.Message, StringComparison.Ordinal);
        Assert.DoesNotContain('\n', e.Message);
    }

    [Fact]
    public void Write_AnyCircuit_IsReadBackToTheLastBit()
    {
        for (int seed = 0; seed < 60; seed++)
        {
            Random random = new(seed);
            Circuit circuit = RandomCircuit.Of(random, RandomCircuit.Variables(random, 4));
            byte[] written = Write(circuit);

            Assert.Equal(written, Write(Read(Encoding.UTF8.GetString(written))));
        }
    }

    [Fact]
    public void Write_AProfileCircuit_IsReadBackInBothForms()
    {
        Evenhand.Circuits.Profiles.ProfileCircuit profile = RandomProfile.Circuit(3, 5, 7);
        using MemoryStream first = new(), second = new();
        ProfileFile.Write(profile, first);
        first.Position = 0;
        using System.Text.Json.JsonDocument parsed = CircuitReader.Parse(first);
        CircuitReader.Read(parsed.RootElement);
        ProfileFile.Write(ProfileFile.Read(parsed.RootElement)!, second);

        Assert.Equal(first.ToArray(), second.ToArray());
    }

    private static string File(string nodes, string? variables = null) =>
        $$"""{"format":"evenhand-circuit/1","variables":{{variables ?? Variables}},"nodes":{{nodes}},"root":1}""";

    private static Circuit Read(string json)
    {
        using MemoryStream stream = new(Encoding.UTF8.GetBytes(json));
        return CircuitReader.Read(stream);
    }

    private static byte[] Write(Circuit circuit)
    {
        using MemoryStream stream = new();
        CircuitWriter.Write(circuit, stream);
        return stream.ToArray();
    }
}
