namespace Evenhand.Monitoring.Charters;

/// <summary>The period that <c>shift</c> rules compare with: a length before the window, or fixed instants.</summary>
/// <param name="Length">The stretch just before the window; null where fixed.</param>
/// <param name="From">Start in microseconds since 1970-01-01T00:00:00Z; null where a length is given.</param>
/// <param name="To">End (exclusive), likewise.</param>
public sealed record Baseline(CharterDuration? Length, long? From, long? To);
