namespace Evenhand.Circuits.Structure;

/// <summary>The arrays that a circuit is made of, children before parents.</summary>
internal sealed record CircuitArrays
{
    /// <summary>The variables.</summary>
    public required IReadOnlyList<Variable> Variables { get; init; }

    /// <summary>What each node is.</summary>
    public required NodeKind[] Kinds { get; init; }

    /// <summary>Where each node's children begin; one more at the end.</summary>
    public required int[] First { get; init; }

    /// <summary>The children of all nodes.</summary>
    public required int[] Children { get; init; }

    /// <summary>The weight of each child of a sum; 1 for children of products.</summary>
    public required double[] Weights { get; init; }

    /// <summary>The variable of each leaf; −1 for other nodes.</summary>
    public required int[] LeafVariables { get; init; }

    /// <summary>Where each leaf's numbers begin.</summary>
    public required int[] FirstParameter { get; init; }

    /// <summary>The numbers of all leaves.</summary>
    public required double[] Parameters { get; init; }

    /// <summary>The id of each node in messages.</summary>
    public required long[] Ids { get; init; }

    /// <summary>Whether leaves and sums add up to one.</summary>
    public required bool IsNormalised { get; init; }
}
