using Evenhand.Circuits.Structure;

namespace Evenhand.Circuits.Profiles;

/// <summary>The monitored family: a hidden Chow–Liu tree below cells of groups and decision.</summary>
/// <remarks>
/// p(cell, known labels, z, x) = P(cell) · P(z₀ | cell) · P(known labels | decision, z₀) · Π P(z_i | z_parent) · Π P(x_i | z_i). A missing
/// field is summed out, a missing label sums over cells. <see cref="ToCircuit"/> gives the same distribution as a general circuit.
/// </remarks>
public sealed class ProfileCircuit
{
    /// <summary>Makes a circuit.</summary>
    public ProfileCircuit(ProfileShape shape, ProfileParameters parameters)
    {
        ArgumentNullException.ThrowIfNull(shape);
        ArgumentNullException.ThrowIfNull(parameters);
        Shape = shape;
        Parameters = parameters;
    }

    /// <summary>What it is over.</summary>
    public ProfileShape Shape { get; }

    /// <summary>Its probabilities.</summary>
    public ProfileParameters Parameters { get; }

    /// <summary>The same distribution as a general circuit, over groups, decision, fields and, where there are groups, which labels are known.</summary>
    public Circuit ToCircuit() => ProfileConversion.ToCircuit(this);
}
