namespace Evenhand.Circuits.Profiles;

/// <summary>How far a column, given its parent on the tree, is from where it was.</summary>
/// <param name="Field">The column.</param>
/// <param name="Divergence">Its part of the Kullback–Leibler divergence in nats, as counted; NaN without records.</param>
/// <param name="Corrected">The same less what is expected where nothing changed, degrees of freedom / 2 · (1/n + 1/m).</param>
/// <param name="G">The likelihood-ratio statistic of no change.</param>
/// <param name="Freedom">Its degrees of freedom.</param>
/// <param name="P">Its p-value by the χ² distribution; NaN without degrees of freedom.</param>
public readonly record struct FieldDrift(int Field, double Divergence, double Corrected, double G, int Freedom, double P);
