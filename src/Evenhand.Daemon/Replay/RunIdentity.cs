using System.Security.Cryptography;
using System.Text.Json.Nodes;
using Evenhand.Monitoring.Snapshots;
using Evenhand.Monitoring.Windows;

namespace Evenhand.Daemon.Replay;

/// <summary>The identity of a replay: the same charter, circuit, inputs, as-of, outcomes and labels give the same one.</summary>
internal static class RunIdentity
{
    /// <summary>SHA-256 over the canonical JSON of what makes a run, lower-case hexadecimal.</summary>
    /// <param name="charter">Hash of the charter file.</param>
    /// <param name="inputs">Hashes of the inputs in order.</param>
    /// <param name="asOf">The as-of asked for, in microseconds; null where none was.</param>
    /// <param name="outcomes">Hash of the outcomes file; null without one.</param>
    /// <param name="labels">Hash of the feed of labels; null without one.</param>
    public static string Of(string charter, IEnumerable<string> inputs, long? asOf, string? outcomes, string? labels)
    {
        JsonObject parts = new()
        {
            ["charter"] = charter,
            ["circuit"] = null,
            ["inputs"] = new JsonArray([.. inputs.Select(i => (JsonNode)i)]),
            ["as_of"] = asOf is null ? null : EventTime.Text(asOf.Value),
            ["outcomes"] = outcomes,
        };
        if (labels is not null)
        {
            parts["labels"] = labels;
        }

        return Convert.ToHexStringLower(SHA256.HashData(CanonicalJson.Serialize(parts)));
    }
}
