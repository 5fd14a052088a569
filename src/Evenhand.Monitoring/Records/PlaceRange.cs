namespace Evenhand.Monitoring.Records;

/// <summary>The places of one field: a stretch of <see cref="RecordPlaces.Order"/>.</summary>
/// <param name="From">First index.</param>
/// <param name="Count">Number of places; 0 for a field that is not read.</param>
internal readonly record struct PlaceRange(int From, int Count);
