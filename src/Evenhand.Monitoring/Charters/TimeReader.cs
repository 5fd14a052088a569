namespace Evenhand.Monitoring.Charters;

/// <summary>Reads where event time stands.</summary>
internal static class TimeReader
{
    /// <summary>The time field, or null.</summary>
    public static TimeField? Read(KeyedNode? node)
    {
        if (node?.Node is not Yaml.MapNode)
        {
            return PathValue.Read(node) is { } path ? new TimeField(path, TimeUnit.Rfc3339) : null;
        }

        MapReader map = node.Map(CharterShapes.Time, "")!;
        FieldPath? at = PathValue.Read(map.Require("at", "say where the time stands, such as at: /decided_at"));
        TimeUnit unit = TextValue.Choice(map.Find("unit"), "s", "ms", "us") switch
        {
            "s" => TimeUnit.Seconds,
            "ms" => TimeUnit.Milliseconds,
            "us" => TimeUnit.Microseconds,
            _ => TimeUnit.Rfc3339,
        };
        return at is null ? null : new TimeField(at, unit);
    }
}
