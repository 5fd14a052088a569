namespace Evenhand.Monitoring.Charters;

/// <summary>Reads what shifts are compared with.</summary>
internal static class BaselineReader
{
    /// <summary>The baseline, or null where none is given.</summary>
    public static Baseline? Read(KeyedNode? node)
    {
        if (node?.Node is not Yaml.MapNode)
        {
            return DurationValue.Read(node, "30d, or { from: 2031-01-01T00:00:00Z, to: 2031-02-01T00:00:00Z }") is { } length
                ? new Baseline(length, null, null)
                : null;
        }

        MapReader map = node.Map(CharterShapes.Baseline, "")!;
        long? from = InstantValue.Read(map.Require("from", "say where it begins, such as from: 2031-01-01T00:00:00Z"));
        long? to = InstantValue.Read(map.Require("to", "say where it ends, such as to: 2031-02-01T00:00:00Z"));
        if (from >= to)
        {
            map.Report("to", "is not later than from", "write an instant after from");
        }

        return from is null || to is null ? null : new Baseline(null, from, to);
    }
}
