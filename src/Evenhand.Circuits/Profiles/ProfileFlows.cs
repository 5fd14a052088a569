namespace Evenhand.Circuits.Profiles;

/// <summary>Expected counts of a profile circuit's parts over some records: what learning adds up.</summary>
/// <typeparam name="T">float or double.</typeparam>
public sealed class ProfileFlows<T>
    where T : unmanaged
{
    internal ProfileFlows(ProfileShape shape, int width)
    {
        Width = width;
        Evidence = new T[shape.EvidenceCount * width];
        Outer = [.. Enumerable.Range(0, shape.Fields.Count).Select(f => f != shape.Root && shape.Inner.Contains(f) ? new T[width * width] : [])];
        Emissions = [.. shape.Fields.Select(f => new T[(f.StateCount + 1) * width])];
    }

    /// <summary>Numbers a row: the profiles, padded.</summary>
    public int Width { get; }

    /// <summary>Records added.</summary>
    public long Records { get; internal set; }

    /// <summary>Sum of the log-likelihoods of the records added, at the parameters in force.</summary>
    public double LogLikelihood { get; internal set; }

    /// <summary>By evidence the posterior of the profile, summed.</summary>
    internal T[] Evidence { get; }

    /// <summary>By field Σ ratio · up, to be multiplied by the transition.</summary>
    internal T[][] Outer { get; }

    /// <summary>By field, for each value and then for missing, the posterior of the hidden state, summed.</summary>
    internal T[][] Emissions { get; }

    /// <summary>Forgets everything.</summary>
    public void Clear()
    {
        Records = 0;
        LogLikelihood = 0;
        Array.Clear(Evidence);
        foreach (T[] sums in Outer.Concat(Emissions))
        {
            Array.Clear(sums);
        }
    }
}
