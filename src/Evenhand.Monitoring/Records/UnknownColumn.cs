namespace Evenhand.Monitoring.Records;

/// <summary>A field of the charter none of whose places is a column of the table.</summary>
/// <param name="Key">The charter's key, such as <c>groups: language</c>.</param>
/// <param name="Places">The field's places, joined by <c>, </c>.</param>
/// <param name="Nearest">The column whose name is nearest; null where none is near.</param>
/// <param name="Required">Whether records cannot be read without it; an outcome beside a decision may come later.</param>
public sealed record UnknownColumn(string Key, string Places, string? Nearest, bool Required);
