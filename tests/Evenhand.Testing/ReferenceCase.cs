using System.Text.Json;

namespace Evenhand.Testing;

/// <summary>One worked example of tests/data/cases/public_cases.json.</summary>
/// <param name="Id">Its name.</param>
/// <param name="Topic">Its subject.</param>
/// <param name="Source">The publication or data set behind it.</param>
/// <param name="Input">What goes in.</param>
/// <param name="Expected">What must come out.</param>
/// <param name="Tolerance">How exactly.</param>
public sealed record ReferenceCase(string Id, string Topic, string Source, JsonElement Input, JsonElement Expected, Tolerance Tolerance)
{
    /// <summary>The expected member of a name, if the case has it.</summary>
    public bool TryExpected(string name, out JsonElement value) => Expected.TryGetProperty(name, out value);

    /// <summary>A whole number of the input.</summary>
    public long Count(string name) => Input.GetProperty(name).GetInt64();

    /// <summary>A list of whole numbers of the input.</summary>
    public long[] Counts(string name) => [.. Input.GetProperty(name).EnumerateArray().Select(x => x.GetInt64())];

    /// <summary>The name, so that a test runner lists the case by it.</summary>
    public override string ToString() => Id;
}
