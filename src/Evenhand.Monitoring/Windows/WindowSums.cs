using System.Numerics;
using Evenhand.Monitoring.Records;
using Evenhand.Statistics.Intervals;

namespace Evenhand.Monitoring.Windows;

/// <summary>The sums of one window, for all slices together or for one.</summary>
/// <param name="layout">What stands where.</param>
/// <param name="window">The window's name: the charter's text, or <c>all</c>.</param>
/// <param name="slice">The slice's text, such as <c>version=3.2</c>; null for all together.</param>
/// <param name="values">The sums, of the layout's length.</param>
public sealed class WindowSums(SumLayout layout, string window, string? slice, long[] values)
{
    /// <summary>What stands where.</summary>
    public SumLayout Layout { get; } = layout;

    /// <summary>The window's name.</summary>
    public string Window { get; } = window;

    /// <summary>The slice's text; null for all together.</summary>
    public string? Slice { get; } = slice;

    /// <summary>The sums.</summary>
    public long[] Values { get; } = values;

    /// <summary>By grouping, the cell that was compared with when the sums were whole; empty unless they come from a state that withholds some.</summary>
    public Dictionary<string, int> StatedReferences { get; } = [];

    /// <summary>The decisions of a cell by outcome.</summary>
    public CellCounts Counts(GroupingShape shape, int cell)
    {
        ArgumentNullException.ThrowIfNull(shape);
        return new CellCounts(Values.AsMemory(shape.CountsAt + (cell * SumLayout.CountWidth), SumLayout.CountWidth));
    }

    /// <summary>How often a field was missing (0) or unlisted (1) among the decided records of a cell.</summary>
    public long Absent(GroupingShape shape, int cell, int field, int kind)
    {
        ArgumentNullException.ThrowIfNull(shape);
        return Values[shape.AbsencesAt + (((cell * Layout.AbsenceFields.Count) + field) * 2) + kind];
    }

    /// <summary>The unfavourable (0) or favourable (1) decisions of a cell in a stratum.</summary>
    public long InStratum(GroupingShape shape, int cell, int stratum, int favourable)
    {
        ArgumentNullException.ThrowIfNull(shape);
        return Values[shape.StrataAt + (((cell * Layout.Strata) + stratum) * 2) + favourable];
    }

    /// <summary>Count, sum and sum of squares of the scores of a cell for some outcomes, in units of <see cref="RecordBatch.ScoreUnit"/>.</summary>
    public (long Count, BigInteger Sum, BigInteger Squares) Scores(GroupingShape shape, int cell, OutcomeCode outcome)
    {
        ArgumentNullException.ThrowIfNull(shape);
        int at = shape.ScoresAt + (cell * SumLayout.ScoreWidth) + ((int)outcome * 5);
        return (Values[at], Whole(at + 1), Whole(at + 3));
    }

    /// <summary>Mean and sample variance of the scores of a cell, whatever the outcome, on the charter's scale.</summary>
    public Moments ScoreMoments(GroupingShape shape, int cell)
    {
        long count = 0;
        BigInteger sum = 0, squares = 0;
        foreach (OutcomeCode outcome in Enum.GetValues<OutcomeCode>())
        {
            (long n, BigInteger s, BigInteger q) = Scores(shape, cell, outcome);
            count += n;
            sum += s;
            squares += q;
        }

        Moments unit = MomentsOf(count, sum, squares);
        double width = Layout.Charter.Score!.High - Layout.Charter.Score.Low;
        return new Moments(count, Layout.Charter.Score.Low + (width * unit.Mean), width * width * unit.Variance);
    }

    /// <summary>Mean and sample variance of score less outcome (1 or 0) over the records of a cell with both, on the charter's scale.</summary>
    public Moments CalibrationMoments(GroupingShape shape, int cell)
    {
        (long positives, BigInteger sum1, BigInteger squares1) = Scores(shape, cell, OutcomeCode.Positive);
        (long negatives, BigInteger sum0, BigInteger squares0) = Scores(shape, cell, OutcomeCode.Negative);
        double low = Layout.Charter.Score!.Low;
        double width = Layout.Charter.Score.High - low;
        Moments one = MomentsOf(positives, sum1, squares1);
        Moments zero = MomentsOf(negatives, sum0, squares0);
        return Pool(
            new Moments(positives, low + (width * one.Mean) - 1, width * width * one.Variance),
            new Moments(negatives, low + (width * zero.Mean), width * width * zero.Variance));
    }

    private static Moments MomentsOf(long count, BigInteger sum, BigInteger squares)
    {
        if (count == 0)
        {
            return new Moments(0, double.NaN, double.NaN);
        }

        // Exact up to the last division: n Σs² − (Σs)² cancels badly in floating point when scores lie close together.
        double unit = RecordBatch.ScoreUnit;
        double mean = (double)sum / count / unit;
        BigInteger spread = BigInteger.Max(0, (squares * count * RecordBatch.ScoreUnit) - (sum * sum));
        double variance = count < 2 ? double.NaN : (double)spread / unit / unit / count / (count - 1);
        return new Moments(count, mean, variance);
    }

    private static Moments Pool(Moments a, Moments b)
    {
        if (a.Count == 0 || b.Count == 0)
        {
            return a.Count == 0 ? b : a;
        }

        double count = a.Count + b.Count;
        double mean = ((a.Count * a.Mean) + (b.Count * b.Mean)) / count;
        double squares = SquaresOf(a) + SquaresOf(b) + (a.Count * b.Count / count * (a.Mean - b.Mean) * (a.Mean - b.Mean));
        return new Moments(count, mean, squares / (count - 1));
    }

    private static double SquaresOf(Moments m) => m.Count < 2 ? 0 : m.Variance * (m.Count - 1);

    private BigInteger Whole(int at) => ((BigInteger)Values[at + 1] << 20) + Values[at];
}
