namespace Evenhand.Monitoring.Charters;

/// <summary>Where event time stands and how it is written.</summary>
/// <param name="At">The place.</param>
/// <param name="Unit">The notation.</param>
public sealed record TimeField(FieldPath At, TimeUnit Unit);
