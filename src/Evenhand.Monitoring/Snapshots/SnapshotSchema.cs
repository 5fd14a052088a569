namespace Evenhand.Monitoring.Snapshots;

/// <summary>The JSON Schema (draft 2020-12) of a snapshot document.</summary>
public static class SnapshotSchema
{
    /// <summary>The schema's text.</summary>
    public static string Text { get; } = Read();

    private static string Read()
    {
        using var stream = typeof(SnapshotSchema).Assembly.GetManifestResourceStream("snapshot.schema.json")
            ?? throw new InvalidOperationException("The program was built without its snapshot schema.");
        using var reader = new StreamReader(stream);
        return reader.ReadToEnd();
    }
}
