namespace Evenhand.Monitoring.Charters;

/// <summary>Reads what tells one record from another.</summary>
internal static class RecordIdReader
{
    /// <summary>The places of the id and of the revision, each null where not given.</summary>
    public static (FieldPath? Id, FieldPath? Revision) Read(MapReader root)
    {
        KeyedNode? node = root.Find("id");
        FieldPath? revision = PathValue.Read(root.Find("revision"));
        if (node is null && root.Has("revision"))
        {
            root.Report("revision", "is given without id", "add id, or remove revision");
        }

        if (node?.Node is not Yaml.MapNode)
        {
            return (PathValue.Read(node), revision);
        }

        MapReader map = node.Map(CharterShapes.RecordId, "")!;
        if (map.Has("revision") && root.Has("revision"))
        {
            root.Report("revision", "is given here and under id", "keep one of the two");
        }

        return (
            PathValue.Read(map.Require("at", "say where the id stands, such as at: /case")),
            revision ?? PathValue.Read(map.Find("revision")));
    }
}
