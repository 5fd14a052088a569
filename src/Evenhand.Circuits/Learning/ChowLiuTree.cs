namespace Evenhand.Circuits.Learning;

/// <summary>
/// The tree of greatest total mutual information: C. K. Chow and C. N. Liu, "Approximating discrete probability distributions with
/// dependence trees", IEEE Transactions on Information Theory 14 (1968) 462–467.
/// </summary>
public static class ChowLiuTree
{
    /// <summary>The parent of each node, −1 for the root.</summary>
    /// <param name="information">n × n, symmetric.</param>
    /// <param name="root">The root; edges point away from it.</param>
    /// <remarks>Prim's algorithm; ties go to the edge found first, by the number of the new node, then of its neighbour.</remarks>
    public static int[] Parents(double[,] information, int root)
    {
        ArgumentNullException.ThrowIfNull(information);
        int n = information.GetLength(0);
        int[] parents = new int[n];
        double[] best = new double[n];
        bool[] isIn = new bool[n];
        Array.Fill(best, double.NegativeInfinity);
        Array.Fill(parents, -1);
        for (int added = root, count = 0; count < n; count++)
        {
            isIn[added] = true;
            int next = -1;
            for (int i = 0; i < n; i++)
            {
                if (isIn[i])
                {
                    continue;
                }

                if (information[added, i] > best[i])
                {
                    (best[i], parents[i]) = (information[added, i], added);
                }

                next = next < 0 || best[i] > best[next] ? i : next;
            }

            added = next;
        }

        return parents;
    }

    /// <summary>The mutual information of every pair of columns, corrected for chance.</summary>
    public static double[,] Information(IReadOnlyList<ushort[]> columns, IReadOnlyList<int> states)
    {
        ArgumentNullException.ThrowIfNull(columns);
        ArgumentNullException.ThrowIfNull(states);
        double[,] information = new double[columns.Count, columns.Count];
        for (int a = 0; a < columns.Count; a++)
        {
            for (int b = 0; b < a; b++)
            {
                information[a, b] = information[b, a] = PairInformation.Corrected(columns[a], states[a], columns[b], states[b]);
            }
        }

        return information;
    }

    /// <summary>The same tree with another root.</summary>
    public static int[] Reroot(IReadOnlyList<int> parents, int root)
    {
        ArgumentNullException.ThrowIfNull(parents);
        int[] turned = [.. parents];
        int above = -1;
        for (int at = root; at >= 0;)
        {
            int up = parents[at];
            turned[at] = above;
            (above, at) = (at, up);
        }

        return turned;
    }
}
