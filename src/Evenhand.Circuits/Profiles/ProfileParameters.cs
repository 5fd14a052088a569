namespace Evenhand.Circuits.Profiles;

/// <summary>The probabilities of a profile circuit, K the number of profiles. Arrays are not to be changed once a circuit is made of them.</summary>
public sealed class ProfileParameters
{
    /// <summary>P(cell), one a cell.</summary>
    public required double[] Cells { get; init; }

    /// <summary>P(profile | cell), K a cell.</summary>
    public required double[] Weights { get; init; }

    /// <summary>P(pattern of known labels | decision, profile), for each decision and profile one a pattern.</summary>
    public required double[] Patterns { get; init; }

    /// <summary>For each field P(hidden state | parent's), K × K by parent's state; empty for the root and leaf fields.</summary>
    public required double[][] Transitions { get; init; }

    /// <summary>For each field P(value | hidden state), K a value.</summary>
    public required double[][] Emissions { get; init; }

    /// <summary>Empty arrays of the right lengths.</summary>
    public static ProfileParameters Zero(ProfileShape shape)
    {
        ArgumentNullException.ThrowIfNull(shape);
        int k = shape.Profiles;
        return new ProfileParameters
        {
            Cells = new double[shape.CellCount],
            Weights = new double[shape.CellCount * k],
            Patterns = new double[shape.Decisions * k * shape.PatternCount],
            Transitions = [.. Enumerable.Range(0, shape.Fields.Count).Select(f => f != shape.Root && shape.Inner.Contains(f) ? new double[k * k] : [])],
            Emissions = [.. shape.Fields.Select(f => new double[f.StateCount * k])],
        };
    }
}
