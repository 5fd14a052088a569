using Evenhand.Circuits.Structure;

namespace Evenhand.Circuits.Profiles;

/// <summary>Profile circuits as general circuits: hidden states become sums, everything shared stays shared.</summary>
internal static class ProfileConversion
{
    /// <summary>The variable that says which labels are known.</summary>
    public const string KnownLabels = "(known labels)";

    public static Circuit ToCircuit(ProfileCircuit profile)
    {
        ProfileShape shape = profile.Shape;
        List<Variable> variables = [.. shape.Groups];
        int known = -1, decision = -1;
        if (shape.Decision is not null)
        {
            decision = variables.Count;
            variables.Add(shape.Decision);
        }

        if (shape.Groups.Count > 0)
        {
            known = variables.Count;
            variables.Add(Variable.Category(KnownLabels, Enumerable.Range(0, shape.PatternCount).Select(p => PatternName(shape, p))));
        }

        int firstField = variables.Count;
        variables.AddRange(shape.Fields);
        CircuitBuilder builder = new(variables);
        int[][] nodes = AddTree(profile, firstField, builder);
        int[] patterns = known < 0 ? [] : AddPatterns(profile, known, builder);
        return builder.Build(AddRoot(profile, nodes[shape.Root], patterns, decision, builder));
    }

    private static string PatternName(ProfileShape shape, int pattern)
    {
        string names = string.Join('+', shape.Groups.Where((_, g) => (pattern >> g & 1) == 1).Select(g => g.Name));
        return names.Length == 0 ? "none" : names;
    }

    /// <summary>For each inner field and hidden state the node of everything at and below it.</summary>
    private static int[][] AddTree(ProfileCircuit profile, int firstField, CircuitBuilder builder)
    {
        ProfileShape shape = profile.Shape;
        int k = shape.Profiles;
        int[][] nodes = new int[shape.Fields.Count][];
        foreach (int field in shape.Inner)
        {
            int[] children = [.. shape.Inner.Where(c => shape.Parents[c] == field)];
            nodes[field] = new int[k];
            for (int z = 0; z < k; z++)
            {
                List<int> parts = [AddLeaf(profile, field, z, firstField, builder)];
                parts.AddRange(shape.Leaves[field].Select(leaf => AddLeaf(profile, leaf, z, firstField, builder)));
                parts.AddRange(children.Select(c => builder.AddSum(nodes[c], profile.Parameters.Transitions[c].AsSpan(z * k, k))));
                nodes[field][z] = parts.Count == 1 ? parts[0] : builder.AddProduct(parts.ToArray());
            }
        }

        return nodes;
    }

    private static int AddLeaf(ProfileCircuit profile, int field, int z, int firstField, CircuitBuilder builder)
    {
        int k = profile.Shape.Profiles;
        double[] emissions = profile.Parameters.Emissions[field];
        double[] p = new double[profile.Shape.Fields[field].StateCount];
        for (int x = 0; x < p.Length; x++)
        {
            p[x] = emissions[(x * k) + z];
        }

        return builder.AddDiscrete(firstField + field, p);
    }

    private static int[] AddPatterns(ProfileCircuit profile, int variable, CircuitBuilder builder)
    {
        ProfileShape shape = profile.Shape;
        int[] nodes = new int[shape.Decisions * shape.Profiles];
        for (int i = 0; i < nodes.Length; i++)
        {
            nodes[i] = builder.AddDiscrete(variable, profile.Parameters.Patterns.AsSpan(i * shape.PatternCount, shape.PatternCount));
        }

        return nodes;
    }

    private static int AddRoot(ProfileCircuit profile, int[] trees, int[] patterns, int decision, CircuitBuilder builder)
    {
        ProfileShape shape = profile.Shape;
        int k = shape.Profiles;
        int[][] labels = [.. shape.Groups.Select((group, g) => Indicators(g, group, builder))];
        int[] decisions = shape.Decision is null ? [] : Indicators(decision, shape.Decision, builder);
        int[] cells = new int[shape.CellCount];
        for (int cell = 0; cell < cells.Length; cell++)
        {
            (int[] codes, int d) = shape.CellOf(cell);
            int[] profiles = new int[k];
            for (int z = 0; z < k; z++)
            {
                profiles[z] = patterns.Length == 0 ? trees[z] : builder.AddProduct([trees[z], patterns[(d * k) + z]]);
            }

            int mixture = builder.AddSum(profiles, profile.Parameters.Weights.AsSpan(cell * k, k));
            List<int> parts = [mixture, .. codes.Select((code, g) => labels[g][code])];
            if (decisions.Length > 0)
            {
                parts.Add(decisions[d]);
            }

            cells[cell] = parts.Count == 1 ? mixture : builder.AddProduct(parts.ToArray());
        }

        return cells.Length == 1 ? cells[0] : builder.AddSum(cells, profile.Parameters.Cells);
    }

    private static int[] Indicators(int variable, Variable of, CircuitBuilder builder)
    {
        int[] nodes = new int[of.StateCount];
        for (int s = 0; s < nodes.Length; s++)
        {
            double[] p = new double[nodes.Length];
            p[s] = 1;
            nodes[s] = builder.AddDiscrete(variable, p);
        }

        return nodes;
    }
}
