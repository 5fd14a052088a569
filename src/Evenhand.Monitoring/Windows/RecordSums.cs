using Evenhand.Monitoring.Records;

namespace Evenhand.Monitoring.Windows;

/// <summary>What one record adds to a bucket, worked out once and added to each of its buckets. Reused; not thread-safe.</summary>
internal sealed class RecordSums(SumLayout layout)
{
    private readonly int[] _ones = new int[layout.Groupings.Count * (2 + (2 * layout.AbsenceFields.Count))];
    private readonly int[] _absent = new int[layout.AbsenceFields.Count];
    private readonly int[] _scores = new int[layout.Groupings.Count];

    // Arrays, not lists behind interfaces: these are walked for every record (measured: a quarter of the whole pipeline's time).
    private readonly GroupingShape[] _shapes = [.. layout.Groupings];
    private readonly int[] _listed = [.. layout.Records.Fields.Select(f => f.ListedCount)];
    private readonly int _absenceStride = layout.AbsenceFields.Count * 2;
    private readonly bool _hasScore = layout.Records.HasScore;
    private int _oneCount;
    private int _absentCount;
    private bool _scored;
    private long _score;
    private long _square;

    /// <summary>Works out the sums of a record that is used or counted as other.</summary>
    public void Set(RecordBatch batch, int entry, OutcomeCode outcome)
    {
        ReadOnlySpan<ushort> codes = batch.CodesOf(entry);
        DecisionCode decision = batch.Decisions[entry];
        _oneCount = 0;
        if (decision == DecisionCode.Other)
        {
            SetOther(codes);
            return;
        }

        FindAbsences(codes, batch.Scores[entry]);
        SetScore(batch.Scores[entry]);
        int count = ((int)decision * 3) + (int)outcome;
        int stratum = layout.Strata > 0 ? layout.StratumOf(codes) : -1;
        for (int g = 0; g < _shapes.Length; g++)
        {
            GroupingShape shape = _shapes[g];
            int cell = shape.CellOf(codes);
            _ones[_oneCount++] = shape.CountsAt + (cell * SumLayout.CountWidth) + count;
            int absences = shape.AbsencesAt + (cell * _absenceStride);
            for (int a = 0; a < _absentCount; a++)
            {
                _ones[_oneCount++] = absences + _absent[a];
            }

            if (stratum >= 0 && shape.StrataAt >= 0)
            {
                _ones[_oneCount++] = shape.StrataAt + (((cell * layout.Strata) + stratum) * 2) + (int)decision;
            }

            _scores[g] = shape.ScoresAt + (cell * SumLayout.ScoreWidth) + ((int)outcome * 5);
        }
    }

    /// <summary>Adds the sums to a bucket.</summary>
    public void AddTo(long[] values)
    {
        foreach (int at in _ones.AsSpan(0, _oneCount))
        {
            // A count of records stays far below 2⁶³.
            unchecked
            {
                values[at]++;
            }
        }

        if (_scored)
        {
            foreach (int at in _scores)
            {
                Span<long> sums = values.AsSpan(at, 5);
                sums[0]++;
                sums[1] += _score & 0xFFFFF;
                sums[2] += _score >> 20;
                sums[3] += _square & 0xFFFFF;
                sums[4] += _square >> 20;
            }
        }
    }

    private void SetOther(ReadOnlySpan<ushort> codes)
    {
        _scored = false;
        foreach (GroupingShape shape in _shapes)
        {
            _ones[_oneCount++] = shape.CountsAt + (shape.CellOf(codes) * SumLayout.CountWidth) + 6;
        }
    }

    private void SetScore(long score)
    {
        _scored = score >= 0;
        _score = score;
        if (_scored)
        {
            // The square has 80 bits; it is rounded to the unit of the score itself, half up.
            UInt128 square = (UInt128)(ulong)score * (ulong)score;
            _square = (long)((square + (UInt128)(RecordBatch.ScoreUnit / 2)) >> 40);
        }
    }

    private void FindAbsences(ReadOnlySpan<ushort> codes, long score)
    {
        _absentCount = 0;
        ReadOnlySpan<int> listed = _listed;
        for (int f = 0; f < codes.Length; f++)
        {
            int special = codes[f] - listed[f];
            if (special is 0 or 1)
            {
                _absent[_absentCount++] = (f * 2) + special;
            }
        }

        if (_hasScore && score < 0)
        {
            _absent[_absentCount++] = (codes.Length * 2) + (score == RecordBatch.MissingScore ? 0 : 1);
        }
    }
}
