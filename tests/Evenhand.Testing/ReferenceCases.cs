using System.Text.Json;

namespace Evenhand.Testing;

/// <summary>Loads the reference cases.</summary>
public static class ReferenceCases
{
    private static readonly Lazy<IReadOnlyList<ReferenceCase>> _all = new(ReadAll);

    /// <summary>The cases of the topics named, in file order; a topic without cases is an error.</summary>
    public static IReadOnlyList<ReferenceCase> Load(params string[] topics)
    {
        foreach (string topic in topics)
        {
            if (_all.Value.All(c => c.Topic != topic))
            {
                throw new ArgumentException($"No reference case has the topic '{topic}'.", nameof(topics));
            }
        }

        return [.. _all.Value.Where(c => topics.Contains(c.Topic))];
    }

    private static List<ReferenceCase> ReadAll()
    {
        using JsonDocument document = JsonDocument.Parse(File.ReadAllBytes(TestData.Path("cases/public_cases.json")));
        return [.. document.RootElement.EnumerateArray().Select(Read)];
    }

    private static ReferenceCase Read(JsonElement element)
    {
        JsonElement tolerance = element.GetProperty("tolerance");
        return new ReferenceCase(
            element.GetProperty("id").GetString()!,
            element.GetProperty("topic").GetString()!,
            element.GetProperty("source").GetString()!,
            element.GetProperty("input").Clone(),
            element.GetProperty("expected").Clone(),
            new Tolerance(Number(tolerance, "abs"), Number(tolerance, "rel")));
    }

    private static double Number(JsonElement tolerance, string name) =>
        tolerance.TryGetProperty(name, out JsonElement value) ? value.GetDouble() : 0;
}
