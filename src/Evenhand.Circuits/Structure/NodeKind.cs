namespace Evenhand.Circuits.Structure;

/// <summary>What a node of a circuit is.</summary>
public enum NodeKind : byte
{
    /// <summary>A distribution over the states of one variable.</summary>
    Discrete = 0,

    /// <summary>A normal distribution of one continuous number, cut off to an interval, or all at one point.</summary>
    Gaussian = 1,

    /// <summary>The product of parts that share no variable.</summary>
    Product = 2,

    /// <summary>The weighted sum of parts over the same variables.</summary>
    Sum = 3,
}
