namespace Evenhand.Circuits.Learning;

/// <summary>Mutual information of two columns of codes over the records that have both.</summary>
public static class PairInformation
{
    /// <summary>Mutual information in nats, as counted (the plug-in estimate).</summary>
    /// <param name="a">Codes of one column; codes at or above <paramref name="statesOfA"/> are missing.</param>
    /// <param name="statesOfA">States of the one.</param>
    /// <param name="b">Codes of the other.</param>
    /// <param name="statesOfB">States of the other.</param>
    /// <param name="records">How many records have both.</param>
    /// <returns>0 where no record has both.</returns>
    public static double Of(ReadOnlySpan<ushort> a, int statesOfA, ReadOnlySpan<ushort> b, int statesOfB, out long records)
    {
        long[] joint = new long[statesOfA * statesOfB];
        records = 0;
        for (int i = 0; i < a.Length; i++)
        {
            if (a[i] < statesOfA && b[i] < statesOfB)
            {
                joint[(a[i] * statesOfB) + b[i]]++;
                records++;
            }
        }

        return Of(joint, statesOfB, records);
    }

    /// <summary>
    /// Mutual information less its expected excess under independence, (A − 1)(B − 1) / 2n, so that columns of many values do not win by
    /// chance (G. A. Miller, "Note on the bias of information estimates", 1955). May be negative.
    /// </summary>
    public static double Corrected(ReadOnlySpan<ushort> a, int statesOfA, ReadOnlySpan<ushort> b, int statesOfB)
    {
        double information = Of(a, statesOfA, b, statesOfB, out long records);
        return records == 0 ? 0 : information - ((statesOfA - 1.0) * (statesOfB - 1.0) / (2.0 * records));
    }

    private static double Of(long[] joint, int statesOfB, long records)
    {
        long[] rows = new long[joint.Length / statesOfB], columns = new long[statesOfB];
        for (int i = 0; i < joint.Length; i++)
        {
            rows[i / statesOfB] += joint[i];
            columns[i % statesOfB] += joint[i];
        }

        double sum = 0;
        for (int i = 0; i < joint.Length; i++)
        {
            if (joint[i] > 0)
            {
                sum += joint[i] * Math.Log((double)joint[i] * records / ((double)rows[i / statesOfB] * columns[i % statesOfB]));
            }
        }

        return records == 0 ? 0 : sum / records;
    }
}
