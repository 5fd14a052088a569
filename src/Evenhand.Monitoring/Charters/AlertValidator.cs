using Evenhand.Monitoring.Charters.Yaml;

namespace Evenhand.Monitoring.Charters;

/// <summary>Checks what each alert rule judges: its kind, window, measure and what the measure needs.</summary>
internal static class AlertValidator
{
    private static readonly string[] MeasureKeys =
        ["measure", "grouping", "group", "field", "window", "basis", "below", "above", "shift", "require_fit"];

    /// <summary>Checks a draft.</summary>
    public static void Check(CharterDraft draft)
    {
        foreach (Drafted<AlertDraft> alert in draft.Alerts)
        {
            if (alert.Map.Has("no_records_for"))
            {
                Silence(alert.Map);
                continue;
            }

            if (!alert.Map.Has("measure"))
            {
                alert.Map.ReportWhole("has neither measure nor no_records_for", "add measure with a limit, or no_records_for");
                continue;
            }

            Window(draft, alert);
            if (Measure(alert) is { } measure)
            {
                Needs(draft, alert, measure);
                AlertGroupValidator.Check(draft, alert, measure);
                AlertLimitValidator.Check(alert, measure);
            }
        }
    }

    private static void Silence(MapReader map)
    {
        foreach (string key in MeasureKeys.Where(map.Has))
        {
            map.Report(key, "does not go with no_records_for", "remove it, or make two rules");
        }
    }

    private static MeasureDefinition? Measure(Drafted<AlertDraft> alert)
    {
        string? name = alert.Value.Rule.Measure;
        MeasureDefinition? measure = name is null ? null : MeasureCatalogue.Find(name);
        if (name is not null && measure is null)
        {
            alert.Map.Report(
                "measure",
                $"{QuotedText.Of(name)} is no measure",
                NearestName.Suggest(name, MeasureCatalogue.All.Select(m => m.Name), "name a measure"));
        }

        return measure;
    }

    private static void Window(CharterDraft draft, Drafted<AlertDraft> alert)
    {
        IEnumerable<string> windows = draft.Settings.Windows.Select(w => w.Text).Append("all");
        if (alert.Value.Rule.Window is { } window && !windows.Contains(window, StringComparer.Ordinal))
        {
            alert.Map.Report(
                "window",
                $"{QuotedText.Of(window)} is none of the charter's windows",
                $"write one of {string.Join(", ", windows)}, or add it to windows");
        }
    }

    private static void Needs(CharterDraft draft, Drafted<AlertDraft> alert, MeasureDefinition measure)
    {
        Need(draft, alert, measure, MeasureNeeds.Score, "score");
        Need(draft, alert, measure, MeasureNeeds.Outcome, "outcome");
        Need(draft, alert, measure, MeasureNeeds.Adjust, "adjust");
        Need(draft, alert, measure, MeasureNeeds.Circuit, "circuit");
        Field(draft, alert, measure);
        if (alert.Value.Rule.Basis == "modelled" && !measure.CanBeModelled)
        {
            alert.Map.Report("basis", $"{measure.Name} is observed only", "write observed, or remove the key");
        }
        else if (alert.Value.Rule.Basis == "modelled" && !draft.Root.Has("circuit"))
        {
            alert.Map.Report("basis", "is modelled, but the charter has no circuit", "add circuit, or write observed");
        }

        if (alert.Value.Rule.RequireFit && !draft.Root.Has("circuit"))
        {
            alert.Map.Report("require_fit", "is set, but the charter has no circuit", "add circuit, or remove the key");
        }
    }

    private static void Need(CharterDraft draft, Drafted<AlertDraft> alert, MeasureDefinition measure, MeasureNeeds need, string key)
    {
        bool isThere = draft.Root.Find(key) is { Node: not ListNode { Items.Count: 0 } };
        if (measure.Needs.HasFlag(need) && !isThere)
        {
            alert.Map.Report("measure", $"{measure.Name} needs {key}, which the charter lacks", $"add {key} to the charter, or judge another measure");
        }
    }

    private static void Field(CharterDraft draft, Drafted<AlertDraft> alert, MeasureDefinition measure)
    {
        if (!measure.Needs.HasFlag(MeasureNeeds.Field))
        {
            if (alert.Map.Has("field"))
            {
                alert.Map.Report("field", $"does not go with {measure.Name}", "remove it");
            }

            return;
        }

        KeyedNode? node = alert.Map.Require("field", $"name the field of {measure.Name}, such as field: income");
        if (node is null || alert.Value.Rule.Field is not { } name || draft.Groups is null || draft.Inputs is null)
        {
            return;
        }

        // Only inputs reach the decision, so only the loss of an input's feed can flip it.
        bool inputsOnly = measure.Needs.HasFlag(MeasureNeeds.Circuit);
        List<string> names = inputsOnly ? draft.Inputs.ConvertAll(i => i.Value.Name) : [.. draft.Fields.Select(f => f.Value.Name)];
        if (!inputsOnly && draft.Root.Has("score"))
        {
            names.Add(ScoreField.FieldName);
        }

        if (!names.Contains(name, StringComparer.Ordinal))
        {
            string what = inputsOnly ? "no input" : "no group or input of the charter, nor its score";
            node.Report($"{QuotedText.Of(name)} is {what}", NearestName.Suggest(name, names.Where(n => n.Length > 0), "name an input"));
        }
    }
}
