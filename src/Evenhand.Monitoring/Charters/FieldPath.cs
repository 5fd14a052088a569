namespace Evenhand.Monitoring.Charters;

/// <summary>
/// Where a value stands in a record: one or more places, the first one present wins.
/// </summary>
/// <remarks>
/// A place is a JSON Pointer (RFC 6901) into a JSON record or a column name of a CSV or Parquet file.
/// Matching is case-sensitive. A place without a leading slash names a top-level member of a JSON record;
/// a place <c>/name</c> names the column <c>/name</c> or, where no such column exists, <c>name</c>.
/// </remarks>
/// <param name="Places">At least one place, in the order in which they are tried.</param>
public sealed record FieldPath(IReadOnlyList<string> Places)
{
    /// <summary>The places joined by <c>, </c>, as messages show them.</summary>
    public override string ToString() => string.Join(", ", Places);
}
