namespace Evenhand.Circuits.Structure;

/// <summary>A circuit is not what it has to be, or a question cannot be answered under it; the message says why in one line.</summary>
public sealed class CircuitException : Exception
{
    /// <summary>Says what is wrong.</summary>
    public CircuitException(string message)
        : base(message)
    {
    }

    /// <summary>Says what is wrong with a node.</summary>
    /// <param name="node">The node's id.</param>
    /// <param name="message">What is wrong with it.</param>
    public CircuitException(long node, string message)
        : base(FormattableString.Invariant($"node {node}: {message}")) => Node = node;

    /// <summary>Says what is wrong, and what brought it up.</summary>
    public CircuitException(string message, Exception inner)
        : base(message, inner)
    {
    }

    /// <summary>Nothing more than that something is wrong.</summary>
    public CircuitException()
    {
    }

    /// <summary>The id of the node that is at fault; null where none is.</summary>
    public long? Node { get; }
}
