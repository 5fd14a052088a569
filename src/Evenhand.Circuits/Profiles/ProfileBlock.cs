namespace Evenhand.Circuits.Profiles;

/// <summary>A block of records for a profile circuit: codes in, likelihoods out, and the room that the passes need. Reused; not thread-safe.</summary>
/// <typeparam name="T">float or double: what the circuit computes in.</typeparam>
public sealed class ProfileBlock<T>
    where T : unmanaged
{
    internal ProfileBlock(ProfileShape shape, int capacity, int width)
    {
        Capacity = capacity;
        Codes = [.. shape.Fields.Select(_ => new ushort[capacity])];
        Evidence = new int[capacity];
        LogLikelihood = new double[capacity];
        Scale = new double[capacity];
        LogScale = new double[capacity];
        Up = new T[shape.Fields.Count][];
        Message = new T[shape.Fields.Count][];
        Down = new T[shape.Fields.Count][];
        foreach (int field in shape.Inner)
        {
            Up[field] = new T[capacity * width];
            Message[field] = new T[capacity * width];
            Down[field] = new T[capacity * width];
        }

        Ratio = new T[capacity * width];
    }

    /// <summary>Most records.</summary>
    public int Capacity { get; }

    /// <summary>Records in the block, at most <see cref="Capacity"/>.</summary>
    public int Count { get; set; }

    /// <summary>By field and record the code of its value; the field's number of states where it is missing.</summary>
    public ushort[][] Codes { get; }

    /// <summary>By record what is known of groups and decision: <see cref="ProfileShape.EvidenceOf"/>.</summary>
    public int[] Evidence { get; }

    /// <summary>By record the natural logarithm of the probability of all that is known of it; −∞ where it is impossible.</summary>
    public double[] LogLikelihood { get; }

    /// <summary>The product of what was divided out of each record's numbers, and the logarithm of what no longer fits there.</summary>
    internal double[] Scale { get; }

    /// <summary>The logarithm of the part of the scale that was taken out of <see cref="Scale"/>.</summary>
    internal double[] LogScale { get; }

    /// <summary>By inner field K numbers a record: what the field and all below it say about its hidden state.</summary>
    internal T[][] Up { get; }

    /// <summary>By inner field K numbers a record: what it says about its parent's hidden state.</summary>
    internal T[][] Message { get; }

    /// <summary>By inner field K numbers a record: the posterior of its hidden state.</summary>
    internal T[][] Down { get; }

    /// <summary>Room for posterior over message.</summary>
    internal T[] Ratio { get; }
}
