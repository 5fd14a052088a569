using System.Text.Json;
using Evenhand.Circuits.Profiles;
using Evenhand.Circuits.Structure;

namespace Evenhand.Circuits.Files;

/// <summary>Profile circuits in circuit files: as a general circuit, which any reader understands, with the fast form under <c>profile_circuit</c>.</summary>
public static class ProfileFile
{
    /// <summary>Writes a profile circuit.</summary>
    /// <param name="profile">The circuit.</param>
    /// <param name="to">Where to.</param>
    /// <param name="more">Writes further keys of the file; null for none.</param>
    public static void Write(ProfileCircuit profile, Stream to, Action<Utf8JsonWriter>? more = null)
    {
        ArgumentNullException.ThrowIfNull(profile);
        CircuitWriter.Write(profile.ToCircuit(), to, json =>
        {
            json.WritePropertyName("profile_circuit");
            Write(json, profile);
            more?.Invoke(json);
        });
    }

    /// <summary>The fast form of a file, or null where it has none.</summary>
    /// <param name="file">The parsed file, which <see cref="CircuitReader"/> has read.</param>
    /// <exception cref="CircuitException">The fast form does not fit the variables or is not normalised.</exception>
    public static ProfileCircuit? Read(JsonElement file)
    {
        if (!file.TryGetProperty("profile_circuit", out JsonElement json))
        {
            return null;
        }

        Dictionary<string, Variable> variables = file.GetProperty("variables").EnumerateArray().Select(VariableJson.Read).ToDictionary(v => v.Name);
        try
        {
            Variable named(JsonElement name) => variables[name.GetString()!];
            Variable[] groups = [.. json.GetProperty("groups").EnumerateArray().Select(named)], fields = [.. json.GetProperty("fields").EnumerateArray().Select(named)];
            Variable? decision = json.TryGetProperty("decision", out JsonElement d) ? named(d) : null;
            int[] parents = [.. json.GetProperty("parents").EnumerateArray().Select(p => p.GetInt32())];
            ProfileShape shape = new(json.GetProperty("profiles").GetInt32(), groups, decision, fields, parents);
            ProfileParameters zero = ProfileParameters.Zero(shape);
            ProfileParameters read = new()
            {
                Cells = Numbers(json.GetProperty("cells"), zero.Cells.Length, zero.Cells.Length, 1, "cells"),
                Weights = Numbers(json.GetProperty("weights"), zero.Weights.Length, shape.Profiles, 1, "weights"),
                Patterns = Numbers(json.GetProperty("patterns"), zero.Patterns.Length, shape.PatternCount, 1, "patterns"),
                Transitions = Rows(json.GetProperty("transitions"), zero.Transitions, shape.Profiles, 1, "transitions"),
                Emissions = Rows(json.GetProperty("emissions"), zero.Emissions, 0, shape.Profiles, "emissions"),
            };
            return new ProfileCircuit(shape, read);
        }
        catch (Exception e) when (e is KeyNotFoundException or InvalidOperationException or ArgumentException or FormatException)
        {
            throw new CircuitException($"profile_circuit is not laid out as the format says: {e.Message.ReplaceLineEndings(" ")}", e);
        }
    }

    private static void Write(Utf8JsonWriter json, ProfileCircuit profile)
    {
        ProfileShape shape = profile.Shape;
        json.WriteStartObject();
        json.WriteNumber("profiles", shape.Profiles);
        WriteNames(json, "groups", shape.Groups);
        if (shape.Decision is not null)
        {
            json.WriteString("decision", shape.Decision.Name);
        }

        WriteNames(json, "fields", shape.Fields);
        json.WriteStartArray("parents");
        foreach (int parent in shape.Parents)
        {
            json.WriteNumberValue(parent);
        }

        json.WriteEndArray();
        Write(json, "cells", profile.Parameters.Cells);
        Write(json, "weights", profile.Parameters.Weights);
        Write(json, "patterns", profile.Parameters.Patterns);
        Write(json, "transitions", profile.Parameters.Transitions);
        Write(json, "emissions", profile.Parameters.Emissions);
        json.WriteEndObject();
    }

    private static void WriteNames(Utf8JsonWriter json, string key, IReadOnlyList<Variable> variables)
    {
        json.WriteStartArray(key);
        foreach (Variable variable in variables)
        {
            json.WriteStringValue(variable.Name);
        }

        json.WriteEndArray();
    }

    private static void Write(Utf8JsonWriter json, string key, double[][] rows)
    {
        json.WriteStartArray(key);
        foreach (double[] row in rows)
        {
            Write(json, null, row);
        }

        json.WriteEndArray();
    }

    private static void Write(Utf8JsonWriter json, string? key, double[] numbers)
    {
        if (key is not null)
        {
            json.WritePropertyName(key);
        }

        json.WriteStartArray();
        foreach (double number in numbers)
        {
            json.WriteNumberValue(number);
        }

        json.WriteEndArray();
    }

    private static double[][] Rows(JsonElement json, double[][] like, int length, int stride, string key) =>
        json.GetArrayLength() == like.Length
            ? [.. json.EnumerateArray().Select((row, f) => Numbers(row, like[f].Length, length == 0 ? like[f].Length / stride : length, stride, key))]
            : throw new FormatException(FormattableString.Invariant($"{key} has {json.GetArrayLength()} rows for {like.Length} fields"));

    /// <summary>Numbers whose distributions of some length add up to one; with a stride above 1 they stand column by column.</summary>
    private static double[] Numbers(JsonElement json, int count, int length, int stride, string key)
    {
        double[] numbers = [.. json.EnumerateArray().Select(n => n.GetDouble())];
        if (numbers.Length != count || numbers.Any(n => !(n >= 0 && n <= 1 + CircuitBuilder.Tolerance)))
        {
            throw new FormatException(FormattableString.Invariant($"{key} needs {count} probabilities"));
        }

        int distributions = count == 0 ? 0 : count / length;
        for (int i = 0; i < distributions; i++)
        {
            double sum = Enumerable.Range(0, length).Sum(x => stride == 1 ? numbers[(i * length) + x] : numbers[(x * stride) + i]);
            if (Math.Abs(sum - 1) > CircuitBuilder.Tolerance)
            {
                throw new FormatException(FormattableString.Invariant($"{key} is not normalised: {sum} instead of 1"));
            }
        }

        return numbers;
    }
}
