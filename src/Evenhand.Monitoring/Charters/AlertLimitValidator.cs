namespace Evenhand.Monitoring.Charters;

/// <summary>Checks the limits of an alert rule against the scale of its measure.</summary>
internal static class AlertLimitValidator
{
    /// <summary>Checks one rule.</summary>
    public static void Check(Drafted<AlertDraft> alert, MeasureDefinition measure)
    {
        MapReader map = alert.Map;
        bool limit = map.Has("below") || map.Has("above");
        if (!limit && !map.Has("shift"))
        {
            map.ReportWhole("has no limit", "add below, above or shift");
        }
        else if (limit && map.Has("shift"))
        {
            map.Report("shift", "stands beside below or above", "keep one of the two, or make two rules");
        }

        Limit(map, "below", alert.Value.Below, measure);
        Limit(map, "above", alert.Value.Above, measure);
        Shift(map, alert.Value.Shift, measure);
        if (alert.Value.Below?.Value >= alert.Value.Above?.Value)
        {
            map.Report("above", "is not greater than below, so that every value is beyond one of them", "write a greater limit");
        }
    }

    private static void Limit(MapReader map, string key, LimitValue? limit, MeasureDefinition measure)
    {
        if (limit is null || !UnitFits(map, key, limit, measure))
        {
            return;
        }

        (double low, double high, string mend) = measure.Scale switch
        {
            MeasureScale.Rate => (0, 1, "write a share from 0 to 1, or a percentage"),
            MeasureScale.RateGap => (-1, 1, "write a difference from -1 to 1, or percentage points such as -5pp"),
            MeasureScale.Ratio => (0, double.MaxValue, "write a ratio such as 0.8"),
            _ => (double.MinValue, double.MaxValue, ""),
        };
        if (limit.Value < low || limit.Value > high)
        {
            map.Report(key, FormattableString.Invariant($"{limit.Value} can never be a value of {measure.Name}"), mend);
        }
    }

    private static bool UnitFits(MapReader map, string key, LimitValue limit, MeasureDefinition measure)
    {
        bool fits = limit.Unit switch
        {
            "%" => measure.Scale != MeasureScale.Number,
            "pp" => measure.IsShare,
            _ => true,
        };
        if (!fits)
        {
            map.Report(key, $"is written in {limit.Unit}, but {measure.Name} is no share", "write a plain number");
        }

        return fits;
    }

    private static void Shift(MapReader map, LimitValue? shift, MeasureDefinition measure)
    {
        if (map.Has("shift") && !measure.CanShift)
        {
            map.Report("shift", $"does not go with {measure.Name}", "judge the shift of a rate or of a gap of rates, such as selection_rate_gap");
        }
        else if (shift is not null && shift.Value is not (> 0 and <= 1))
        {
            map.Report("shift", FormattableString.Invariant($"{shift.Value} is no change of a share"), "write a change above 0 and at most 1, such as 5pp");
        }
    }
}
