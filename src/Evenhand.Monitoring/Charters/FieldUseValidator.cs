using Evenhand.Monitoring.Charters.Yaml;

namespace Evenhand.Monitoring.Charters;

/// <summary>Checks the parts that name fields: adjustment, deciding models, error rates of the outcome, the label feed.</summary>
internal static class FieldUseValidator
{
    /// <summary>Checks a draft.</summary>
    public static void Check(CharterDraft draft)
    {
        Adjust(draft);
        RuleFields(draft);
        RuleVersions(draft);
        OutcomeNoise(draft);
        if (draft.Settings.LabelFeed is not null && !draft.Root.Has("id"))
        {
            draft.Root.Report("id", "is missing", "say where the id stands, by which the feed under labels is joined");
        }
    }

    private static void Adjust(CharterDraft draft)
    {
        var seen = new HashSet<string>(StringComparer.Ordinal);
        foreach (Drafted<AdjustField> adjust in draft.Adjust)
        {
            string name = adjust.Value.Field;
            Drafted<CodedField>? field = draft.Fields.FirstOrDefault(f => f.Value.Name == name);
            if (name.Length == 0 || draft.Groups is null || draft.Inputs is null)
            {
                continue;
            }

            if (field is null)
            {
                adjust.Map.Report("field", $"{QuotedText.Of(name)} is no group or input", Suggest(draft, name));
            }
            else if (field.Value.Quantiles is not null)
            {
                adjust.Map.Report("field", $"{QuotedText.Of(name)} is cut by quantiles", "give the input values or bands, so that strata stay the same");
            }

            if (!seen.Add(name))
            {
                adjust.Map.Report("field", $"{QuotedText.Of(name)} is listed twice", "keep one of the two");
            }
        }
    }

    private static string Suggest(CharterDraft draft, string name) =>
        NearestName.Suggest(name, draft.Fields.Select(f => f.Value.Name).Where(n => n.Length > 0), "list it under groups or inputs");

    private static void RuleFields(CharterDraft draft)
    {
        List<string>? inputs = draft.Inputs?.ConvertAll(i => i.Value.Name);
        foreach (Drafted<DecisionRule> rule in draft.Rules)
        {
            foreach ((string name, string input) in rule.Value.Fields)
            {
                if (inputs is not null && !inputs.Contains(input))
                {
                    MapReader fields = rule.Map.Find("fields")!.Map(CharterShapes.Free, "")!;
                    fields.Report(name, $"{QuotedText.Of(input)} is no input", NearestName.Suggest(input, inputs, "list it under inputs"));
                }
            }
        }
    }

    private static void RuleVersions(CharterDraft draft)
    {
        SliceField? slice = draft.Slices.Find(s => s.Value.Name == "version")?.Value;
        var seen = new HashSet<string>(StringComparer.Ordinal);
        foreach (Drafted<DecisionRule> rule in draft.Rules)
        {
            if (rule.Value.Version is not { } version)
            {
                continue;
            }

            if (slice is null)
            {
                rule.Map.Report("version", "has no slice to be told by", "add a slice named version, such as { name: version, at: /policy/version }");
            }
            else if (slice.Values is not null && !slice.Values.Contains(version))
            {
                rule.Map.Report("version", $"{QuotedText.Of(version)} is not listed by the slice version", NearestName.Suggest(version, slice.Values, "list it there"));
            }

            if (!seen.Add(version))
            {
                rule.Map.Report("version", $"{QuotedText.Of(version)} has two rules", "keep one of the two");
            }
        }
    }

    private static void OutcomeNoise(CharterDraft draft)
    {
        if (draft.OutcomeNoise.Count > 0 && !draft.Root.Has("outcome"))
        {
            draft.Root.Report("outcome_noise", "is given without an outcome", "add outcome, or remove outcome_noise");
        }

        var seen = new HashSet<string>(StringComparer.Ordinal);
        foreach (Drafted<OutcomeNoise> noise in draft.OutcomeNoise)
        {
            string? name = noise.Value.Grouping;
            if (!seen.Add(name ?? ""))
            {
                noise.Map.ReportWhole("declares the same grouping as an earlier entry", "keep one of the two");
            }

            if (name is not null && draft.Groups is not null)
            {
                NoiseGroups(draft, noise, name);
            }
        }
    }

    private static void NoiseGroups(CharterDraft draft, Drafted<OutcomeNoise> noise, string name)
    {
        if (draft.Group(name) is not { } group)
        {
            noise.Map.Report("grouping", $"{QuotedText.Of(name)} is no group", NearestName.Suggest(name, draft.Groups!.Select(g => g.Value.Name), "list it under groups"));
            return;
        }

        List<string> labels = group.IsSound ? group.Value.ListedLabels() : [];
        foreach (string key in new[] { "false_positive", "false_negative" })
        {
            MapReader? rates = noise.Map.Find(key)?.Node is MapNode ? noise.Map.Find(key)!.Map(CharterShapes.Free, "") : null;
            foreach (string text in rates?.FreeKeys.Where(g => labels.Count > 0 && !labels.Contains(g)) ?? [])
            {
                rates!.Report(text, $"is no group of {name}", NearestName.Suggest(text, labels, "name one of them"));
            }
        }
    }
}
