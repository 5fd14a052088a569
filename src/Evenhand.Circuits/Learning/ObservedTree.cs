using Evenhand.Circuits.Structure;

namespace Evenhand.Circuits.Learning;

/// <summary>A Chow–Liu tree over observed columns with its conditional probabilities: the yardstick beside which circuits are stated.</summary>
/// <remarks>
/// Counts come from the records that have both ends of an edge; half a pseudo-record an entry backs off to the column's margin. Missing
/// values are summed out. Independence is the tree without edges.
/// </remarks>
public sealed class ObservedTree
{
    private const double Pseudo = 0.5;

    private readonly int[] _states;
    private readonly int[] _parents;
    private readonly int[] _order;
    private readonly double[][] _conditionals;

    private ObservedTree(int[] states, int[] parents, double[][] conditionals)
    {
        _states = states;
        _parents = parents;
        _conditionals = conditionals;
        _order = ChildrenFirst(parents);
    }

    /// <summary>The parent of each column; −1 for roots.</summary>
    public IReadOnlyList<int> Parents => _parents;

    /// <summary>Fits the tree of greatest mutual information.</summary>
    public static ObservedTree Fit(IReadOnlyList<ushort[]> columns, IReadOnlyList<int> states)
    {
        ArgumentNullException.ThrowIfNull(columns);
        return Fit(columns, states, ChowLiuTree.Parents(ChowLiuTree.Information(columns, states), 0));
    }

    /// <summary>Fits each column by itself.</summary>
    public static ObservedTree Independent(IReadOnlyList<ushort[]> columns, IReadOnlyList<int> states)
    {
        ArgumentNullException.ThrowIfNull(columns);
        return Fit(columns, states, Enumerable.Repeat(-1, columns.Count).ToArray());
    }

    /// <summary>Fits the conditional probabilities of a given tree.</summary>
    public static ObservedTree Fit(IReadOnlyList<ushort[]> columns, IReadOnlyList<int> states, int[] parents)
    {
        ArgumentNullException.ThrowIfNull(columns);
        ArgumentNullException.ThrowIfNull(states);
        ArgumentNullException.ThrowIfNull(parents);
        double[][] conditionals = [.. columns.Select((column, f) => parents[f] < 0
            ? Margin(column, states[f])
            : Conditional(column, states[f], columns[parents[f]], states[parents[f]]))];
        return new ObservedTree([.. states], parents, conditionals);
    }

    /// <summary>The mean log-likelihood of records in nats; missing values are summed out.</summary>
    public double MeanLogLikelihood(IReadOnlyList<ushort[]> columns)
    {
        ArgumentNullException.ThrowIfNull(columns);
        double[][] messages = [.. _states.Select((_, f) => new double[_parents[f] < 0 ? 1 : _states[_parents[f]]])];
        double[][] evidence = [.. _states.Select(s => new double[s])];
        double sum = 0;
        for (int record = 0; record < columns[0].Length; record++)
        {
            sum += LogLikelihood(columns, record, evidence, messages);
        }

        return sum / columns[0].Length;
    }

    /// <summary>The tree as a general circuit, deterministic: sums only where a parent's value decides.</summary>
    /// <param name="variables">One variable a column.</param>
    public Circuit ToCircuit(IReadOnlyList<Variable> variables)
    {
        CircuitBuilder builder = new(variables);
        int[][] nodes = new int[_states.Length][];
        List<int> roots = [];
        foreach (int column in _order)
        {
            int[] values = [.. Enumerable.Range(0, _states[column]).Select(x => Value(column, x, nodes, builder))];
            int rows = _parents[column] < 0 ? 1 : _states[_parents[column]];
            nodes[column] = [.. Enumerable.Range(0, rows).Select(p => builder.AddSum(values, _conditionals[column].AsSpan(p * values.Length, values.Length)))];
            if (_parents[column] < 0)
            {
                roots.Add(nodes[column][0]);
            }
        }

        return builder.Build(roots.Count == 1 ? roots[0] : builder.AddProduct(roots.ToArray()));
    }

    private int Value(int column, int x, int[][] nodes, CircuitBuilder builder)
    {
        double[] p = new double[_states[column]];
        p[x] = 1;
        int[] parts = [builder.AddDiscrete(column, p), .. Enumerable.Range(0, _parents.Length).Where(c => _parents[c] == column).Select(c => nodes[c][x])];
        return parts.Length == 1 ? parts[0] : builder.AddProduct(parts);
    }

    private double LogLikelihood(IReadOnlyList<ushort[]> columns, int record, double[][] evidence, double[][] messages)
    {
        double log = 0;
        for (int f = 0; f < evidence.Length; f++)
        {
            int code = columns[f][record];
            Array.Fill(evidence[f], code < _states[f] ? 0 : 1);
            if (code < _states[f])
            {
                evidence[f][code] = 1;
            }
        }

        foreach (int column in _order)
        {
            double[] own = evidence[column], message = messages[column], conditional = _conditionals[column];
            double largest = 0;
            for (int p = 0; p < message.Length; p++)
            {
                message[p] = 0;
                for (int x = 0; x < own.Length; x++)
                {
                    message[p] += own[x] * conditional[(p * own.Length) + x];
                }

                largest = Math.Max(largest, message[p]);
            }

            log += Math.Log(largest);
            for (int p = 0; _parents[column] >= 0 && p < message.Length; p++)
            {
                evidence[_parents[column]][p] *= message[p] / largest;
            }
        }

        return log;
    }

    private static double[] Margin(ushort[] column, int states)
    {
        double[] margin = new double[states];
        Array.Fill(margin, Pseudo);
        foreach (ushort code in column)
        {
            if (code < states)
            {
                margin[code]++;
            }
        }

        double sum = margin.Sum();
        return [.. margin.Select(m => m / sum)];
    }

    private static double[] Conditional(ushort[] column, int states, ushort[] parent, int parentStates)
    {
        double[] margin = Margin(column, states), rows = new double[parentStates * states];
        for (int i = 0; i < column.Length; i++)
        {
            if (column[i] < states && parent[i] < parentStates)
            {
                rows[(parent[i] * states) + column[i]]++;
            }
        }

        for (int p = 0; p < parentStates; p++)
        {
            Span<double> row = rows.AsSpan(p * states, states);
            double sum = 0;
            for (int x = 0; x < states; x++)
            {
                row[x] += Pseudo * states * margin[x];
                sum += row[x];
            }

            for (int x = 0; x < states; x++)
            {
                row[x] /= sum;
            }
        }

        return rows;
    }

    private static int[] ChildrenFirst(int[] parents)
    {
        List<int> order = [];
        Queue<int> open = new(Enumerable.Range(0, parents.Length).Where(f => parents[f] < 0));
        while (open.TryDequeue(out int column))
        {
            order.Add(column);
            foreach (int child in Enumerable.Range(0, parents.Length).Where(f => parents[f] == column))
            {
                open.Enqueue(child);
            }
        }

        order.Reverse();
        return [.. order];
    }
}
