namespace Evenhand.Monitoring.Charters;

/// <summary>The JSON Schema of charters, shipped with the program.</summary>
public static class CharterSchema
{
    /// <summary>Name of the format that the schema and this program read.</summary>
    public const string Format = "charter/1";

    /// <summary>The schema (draft 2020-12) with every key, its type, default and meaning.</summary>
    public static string Text { get; } = Read();

    private static string Read()
    {
        using Stream stream = typeof(CharterSchema).Assembly.GetManifestResourceStream("charter.schema.json")
            ?? throw new InvalidOperationException("The program was built without charter.schema.json.");
        using var reader = new StreamReader(stream);
        return reader.ReadToEnd();
    }
}
