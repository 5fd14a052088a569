namespace Evenhand.Monitoring.Charters;

/// <summary>A field whose codes make the strata of adjusted measures.</summary>
/// <param name="Field">Name of a group or an input with listed values or bands.</param>
/// <param name="Why">The reason for adjusting, for whoever reads the evidence; null where none is given.</param>
public sealed record AdjustField(string Field, string? Why);
