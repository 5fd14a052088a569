using System.Globalization;
using System.Text.Json.Nodes;

namespace Evenhand.Daemon.Tests.Replay;

/// <summary>A snapshot document as a replay wrote it, read back from its bytes.</summary>
internal sealed class ReplayedSnapshot(byte[] bytes)
{
    /// <summary>The document.</summary>
    public JsonObject Document { get; } = JsonNode.Parse(bytes)!.AsObject();

    /// <summary>A member of <c>records</c>.</summary>
    public long Records(string name) => Whole(Document["records"]![name]);

    /// <summary>Records rejected for a reason.</summary>
    public long Rejected(string reason) => Whole(Document["records"]!["rejected_by_reason"]![reason]);

    /// <summary>The one reading, over all records and all slices, that has this place.</summary>
    public JsonObject Reading(string measure, string? grouping, string? group, string basis = "observed") => Document["readings"]!.AsArray()
        .Select(r => r!.AsObject())
        .Single(r => Text(r, "window") == "all" && r["slice"] is null && r["field"] is null
            && Text(r, "measure") == measure && Text(r, "basis") == basis
            && Text(r, "grouping") == grouping && Text(r, "group") == group);

    /// <summary>A number of the reading at this place.</summary>
    public double Number(string key, string measure, string? grouping, string? group, string basis = "observed") =>
        Number(Reading(measure, grouping, group, basis), key);

    /// <summary>A number of a reading; NaN where it is withheld, undefined or absent, so that no comparison passes.</summary>
    public static double Number(JsonObject reading, string key) =>
        reading[key] is { } node ? double.Parse(node.ToString(), CultureInfo.InvariantCulture) : double.NaN;

    private static string? Text(JsonObject reading, string key) => (string?)reading[key];

    private static long Whole(JsonNode? node) => node is null ? 0 : long.Parse(node.ToString(), CultureInfo.InvariantCulture);
}
