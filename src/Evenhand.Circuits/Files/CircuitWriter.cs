using System.Text.Json;
using Evenhand.Circuits.Structure;

namespace Evenhand.Circuits.Files;

/// <summary>Writes a circuit file, <c>evenhand-circuit/1</c>; what it writes, <see cref="CircuitReader"/> reads as the same circuit to the last bit.</summary>
public static class CircuitWriter
{
    /// <summary>Writes a circuit.</summary>
    /// <param name="circuit">A distribution without cut-off or known leaves.</param>
    /// <param name="to">Where to.</param>
    /// <param name="more">Writes further keys of the file; null for none.</param>
    public static void Write(Circuit circuit, Stream to, Action<Utf8JsonWriter>? more = null)
    {
        ArgumentNullException.ThrowIfNull(circuit);
        using Utf8JsonWriter json = new(to, new JsonWriterOptions { Encoder = System.Text.Encodings.Web.JavaScriptEncoder.UnsafeRelaxedJsonEscaping });
        json.WriteStartObject();
        json.WriteString("format", CircuitReader.Format);
        json.WriteStartArray("variables");
        foreach (Variable variable in circuit.Variables)
        {
            VariableJson.Write(json, variable);
        }

        json.WriteEndArray();
        json.WriteStartArray("nodes");
        for (int node = 0; node < circuit.NodeCount; node++)
        {
            WriteNode(json, circuit, node);
            FlushNow(json);
        }

        json.WriteEndArray();
        json.WriteNumber("root", circuit.Root);
        more?.Invoke(json);
        json.WriteEndObject();
    }

    /// <summary>Keeps the writer's buffer small, however many nodes there are.</summary>
    private static void FlushNow(Utf8JsonWriter json)
    {
        if (json.BytesPending > 1 << 16)
        {
            json.Flush();
        }
    }

    private static void WriteNode(Utf8JsonWriter json, Circuit circuit, int node)
    {
        json.WriteStartObject();
        json.WriteNumber("id", node);
        switch (circuit.KindOf(node))
        {
            case NodeKind.Product:
                WriteIds(json, "product", circuit.ChildrenOf(node));
                break;
            case NodeKind.Sum:
                WriteIds(json, "sum", circuit.ChildrenOf(node));
                WriteNumbers(json, "weights", circuit.WeightsOf(node));
                break;
            case NodeKind.Discrete:
                json.WriteString("variable", circuit.Variables[circuit.VariableOf(node)].Name);
                WriteNumbers(json, "p", circuit.ParametersOf(node));
                break;
            default:
                Gaussian leaf = Gaussian.Of(circuit.ParametersOf(node));
                if (leaf.IsPoint || !double.IsInfinity(leaf.Low) || !double.IsInfinity(leaf.High))
                {
                    throw new ArgumentException("a normal leaf that is cut off or known has no form in a file", nameof(circuit));
                }

                json.WriteString("variable", circuit.Variables[circuit.VariableOf(node)].Name);
                json.WriteNumber("mean", leaf.Mean);
                json.WriteNumber("sd", leaf.Deviation);
                break;
        }

        json.WriteEndObject();
    }

    private static void WriteIds(Utf8JsonWriter json, string key, ReadOnlySpan<int> ids)
    {
        json.WriteStartArray(key);
        foreach (int id in ids)
        {
            json.WriteNumberValue(id);
        }

        json.WriteEndArray();
    }

    private static void WriteNumbers(Utf8JsonWriter json, string key, ReadOnlySpan<double> numbers)
    {
        json.WriteStartArray(key);
        foreach (double number in numbers)
        {
            json.WriteNumberValue(number);
        }

        json.WriteEndArray();
    }
}
