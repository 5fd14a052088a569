namespace Evenhand.Monitoring.Records;

/// <summary>Keyed 128-bit hash of a record's id (and revision); the id itself is never kept.</summary>
/// <param name="High">The upper 64 bits.</param>
/// <param name="Low">The lower 64 bits.</param>
public readonly record struct IdHash(ulong High, ulong Low);
