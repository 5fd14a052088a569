using CsCheck;

namespace Evenhand.Statistics.Tests;

/// <summary>Generators of counts; extremes (no success, no failure) come up often.</summary>
internal static class Counts
{
    public static Gen<double> Level { get; } = Gen.Double[0.5, 0.9999];

    public static Gen<(long X, long N)> OneGroup(long most) =>
        from n in Gen.Frequency((1, Gen.Long[1, Math.Min(most, 30)]), (1, Gen.Long[1, most]))
        from x in Gen.Frequency((6, Gen.Long[0, n]), (1, Gen.Const(0L)), (1, Gen.Const(n)))
        select (x, n);

    public static Gen<(long X1, long N1, long X2, long N2)> TwoGroups(long most) =>
        from first in OneGroup(most)
        from second in OneGroup(most)
        select (first.X, first.N, second.X, second.N);

    public static Gen<long[]> Strata(int fewest, int most, long largest) => Gen.Long[0, largest].Array[4].Array[fewest, most].Select(s => s.SelectMany(x => x).ToArray());
}
