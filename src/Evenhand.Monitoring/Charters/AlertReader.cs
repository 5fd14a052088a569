namespace Evenhand.Monitoring.Charters;

/// <summary>Reads alert rules, each by itself; <see cref="AlertValidator"/> checks them against the charter.</summary>
internal static class AlertReader
{
    private const string Example = "{ name: language-ratio, measure: impact_ratio, grouping: language, below: 0.8 }";

    /// <summary>The rules.</summary>
    public static List<Drafted<AlertDraft>> Read(KeyedNode? node) =>
        DraftedList.Read(node, CharterShapes.Alert, CharterLimits.Alerts, Example, One) ?? [];

    private static AlertDraft One(MapReader map)
    {
        LimitValue? below = LimitValue.Read(map.Find("below"));
        LimitValue? above = LimitValue.Read(map.Find("above"));
        LimitValue? shift = LimitValue.Read(map.Find("shift"));
        var rule = new AlertRule
        {
            Name = TextValue.Name(map.Require("name", "name the rule, such as name: language-ratio"), ofField: false) ?? "",
            Measure = TextValue.Read(map.Find("measure"), "name a measure such as impact_ratio"),
            Grouping = TextValue.Read(map.Find("grouping"), "name a group, or an intersection such as language+age"),
            Group = TextValue.Read(map.Find("group"), "name one of the grouping's groups"),
            Field = TextValue.Read(map.Find("field"), "name a group, an input or (score)"),
            Window = TextValue.Read(map.Find("window"), "name one of the charter's windows, or all"),
            Basis = TextValue.Choice(map.Find("basis"), "observed", "modelled"),
            Below = below?.Value,
            Above = above?.Value,
            Shift = shift?.Value,
            NoRecordsFor = DurationValue.Read(map.Find("no_records_for"), "10m"),
            Severity = Severity(map),
            CloseAfter = DurationValue.Read(map.Find("close_after"), "30m"),
            RequireFit = TextValue.Flag(map.Find("require_fit")) ?? false,
            Owner = TextValue.Read(map.Find("owner"), "name who answers for it"),
            Runbook = TextValue.Read(map.Find("runbook"), "say where to read what to do"),
            Labels = LabelReader.Free(map.Find("labels")?.Map(CharterShapes.Free, "write a mapping such as { team: grants }")),
            Line = map.Line,
        };
        return new(rule, below, above, shift);
    }

    private static AlertSeverity Severity(MapReader map) => TextValue.Choice(map.Find("severity"), "page", "ticket", "info") switch
    {
        "page" => AlertSeverity.Page,
        "info" => AlertSeverity.Info,
        _ => AlertSeverity.Ticket,
    };
}
