using Evenhand.Circuits.Profiles;

namespace Evenhand.Circuits.Learning;

/// <summary>How likely records that were not learned from are, beside two yardsticks; nats a record, missing values summed out.</summary>
/// <param name="Records">How many.</param>
/// <param name="LogLikelihood">Under the learned circuit.</param>
/// <param name="Independence">Under columns that know nothing of one another.</param>
/// <param name="Tree">Under the observed Chow–Liu tree.</param>
public sealed record HeldOutLikelihood(int Records, double LogLikelihood, double Independence, double Tree)
{
    /// <summary>Measures a circuit on other records than it was learned from.</summary>
    /// <param name="circuit">The circuit.</param>
    /// <param name="sample">What it was learned from; the yardsticks are fitted to it too.</param>
    /// <param name="others">The other records.</param>
    public static HeldOutLikelihood Of(ProfileCircuit circuit, TrainingTable sample, TrainingTable others)
    {
        ArgumentNullException.ThrowIfNull(sample);
        ArgumentNullException.ThrowIfNull(others);
        (ushort[][] learned, int[] states) = Columns(sample);
        (ushort[][] held, _) = Columns(others);
        return new HeldOutLikelihood(
            others.Records,
            ProfileLearner.MeanLogLikelihood(circuit, others),
            ObservedTree.Independent(learned, states).MeanLogLikelihood(held),
            ObservedTree.Fit(learned, states).MeanLogLikelihood(held));
    }

    /// <summary>Everything that the circuit is over: groups, decision, which labels are known, fields.</summary>
    private static (ushort[][] Columns, int[] States) Columns(TrainingTable table)
    {
        List<ushort[]> columns = [.. table.Labels];
        List<int> states = [.. table.Groups.Select(g => g.StateCount)];
        if (table.Decision is not null)
        {
            columns.Add(table.Decisions);
            states.Add(table.Decision.StateCount);
        }

        if (table.Groups.Count > 0)
        {
            columns.Add([.. Enumerable.Range(0, table.Records).Select(r => Pattern(table, r))]);
            states.Add(1 << table.Groups.Count);
        }

        columns.AddRange(table.Values);
        states.AddRange(table.Fields.Select(f => f.StateCount));
        return ([.. columns], [.. states]);
    }

    private static ushort Pattern(TrainingTable table, int record)
    {
        int pattern = 0;
        for (int g = 0; g < table.Groups.Count; g++)
        {
            pattern |= table.Labels[g][record] < table.Groups[g].StateCount ? 1 << g : 0;
        }

        return (ushort)pattern;
    }
}
