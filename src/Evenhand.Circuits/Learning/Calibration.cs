using Evenhand.Circuits.Profiles;

namespace Evenhand.Circuits.Learning;

/// <summary>Whether stated probabilities come true: records sorted into ten bins by the probability stated, beside the share that came true.</summary>
/// <param name="Predictions">Probabilities stated.</param>
/// <param name="Error">Mean over predictions of |mean stated − share come true| in the bin.</param>
/// <param name="Bins">The bins that hold any.</param>
public sealed record Calibration(long Predictions, double Error, IReadOnlyList<CalibrationBin> Bins)
{
    private const int BinCount = 10;

    /// <summary>Calibration of P(favourable | inputs), over the records whose decision is known; null for plain data.</summary>
    public static Calibration? OfDecision(ProfileCircuit circuit, TrainingTable table)
    {
        ArgumentNullException.ThrowIfNull(circuit);
        ArgumentNullException.ThrowIfNull(table);
        if (table.Decision is null)
        {
            return null;
        }

        Tally tally = new();
        ForEach(circuit, table, (answers, record) =>
        {
            if (table.Decisions[record] < table.Decision.StateCount)
            {
                tally.Add(answers.Decision(1), table.Decisions[record] == 1);
            }
        });
        return tally.Result();
    }

    /// <summary>Calibration of P(label | inputs, decision), every listed label stated for each record whose label and decision are known.</summary>
    public static Calibration OfGroup(ProfileCircuit circuit, TrainingTable table, int group)
    {
        ArgumentNullException.ThrowIfNull(circuit);
        ArgumentNullException.ThrowIfNull(table);
        int states = table.Groups[group].StateCount;
        Tally tally = new();
        ForEach(circuit, table, (answers, record) =>
        {
            int label = table.Labels[group][record], decision = table.Decision is null ? 0 : table.Decisions[record];
            for (int code = 0; label < states && decision < circuit.Shape.Decisions && code < states; code++)
            {
                tally.Add(answers.Label(group, code, decision), code == label);
            }
        });
        return tally.Result();
    }

    private static void ForEach(ProfileCircuit circuit, TrainingTable table, Action<ProfileAnswers, int> act)
    {
        ProfileAnswers answers = new(circuit);
        ushort[] codes = new ushort[table.Fields.Count];
        for (int record = 0; record < table.Records; record++)
        {
            for (int f = 0; f < codes.Length; f++)
            {
                codes[f] = table.Values[f][record];
            }

            answers.Take(codes);
            act(answers, record);
        }
    }

    private sealed class Tally
    {
        private readonly long[] _count = new long[BinCount];
        private readonly double[] _stated = new double[BinCount];
        private readonly long[] _true = new long[BinCount];

        public void Add(double stated, bool isTrue)
        {
            int bin = Math.Clamp((int)(stated * BinCount), 0, BinCount - 1);
            _count[bin]++;
            _stated[bin] += stated;
            _true[bin] += isTrue ? 1 : 0;
        }

        public Calibration Result()
        {
            CalibrationBin[] bins =
            [
                .. Enumerable.Range(0, BinCount).Where(b => _count[b] > 0).Select(b => new CalibrationBin(
                    (double)b / BinCount, (b + 1.0) / BinCount, _count[b], _stated[b] / _count[b], (double)_true[b] / _count[b])),
            ];
            long all = _count.Sum();
            return new Calibration(all, all == 0 ? double.NaN : bins.Sum(b => b.Predictions * Math.Abs(b.Stated - b.CameTrue)) / all, bins);
        }
    }
}
