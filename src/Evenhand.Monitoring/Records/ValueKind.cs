namespace Evenhand.Monitoring.Records;

/// <summary>What stands at a place of a record. The order matters: only kinds after <see cref="Null"/> count as present.</summary>
internal enum ValueKind : byte
{
    /// <summary>Nothing.</summary>
    Absent = 0,

    /// <summary>JSON's null, an empty CSV cell, a null of a Parquet column.</summary>
    Null = 1,

    /// <summary>A string without escapes, or a cell.</summary>
    Text = 2,

    /// <summary>A string with escapes that are not resolved yet.</summary>
    EscapedText = 3,

    /// <summary>A JSON number.</summary>
    Number = 4,

    /// <summary>JSON's true or false.</summary>
    Literal = 5,

    /// <summary>An object or an array.</summary>
    Container = 6,
}
