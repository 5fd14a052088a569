namespace Evenhand.Monitoring.Charters;

/// <summary>Reads the parts of a charter into a draft, and makes the charter of a draft without problems.</summary>
internal static class CharterBuilder
{
    /// <summary>Reads every part.</summary>
    public static CharterDraft Read(MapReader root, CharterUse use, CharterFiles files)
    {
        var draft = new CharterDraft(root, use) { Settings = SettingsReader.Read(root) };
        draft.Groups = GroupReader.Read(root.Find("groups"));
        draft.Inputs = InputReader.Read(root.Find("inputs"));
        draft.Slices = SliceReader.Read(root.Find("slices"));
        draft.Intersections = IntersectionReader.Read(root.Find("intersections"));
        draft.Alerts = AlertReader.Read(root.Find("alerts"));
        draft.Rules = new RuleReader(files).Read(root.Find("rule"));
        draft.Adjust = AdjustReader.Read(root.Find("adjust"));
        draft.OutcomeNoise = OutcomeNoiseReader.Read(root.Find("outcome_noise"));
        MapReader? labels = root.Find("labels")?.Map(CharterShapes.Labels, "write a mapping such as { team: grants }");
        draft.Settings = draft.Settings with
        {
            Circuit = new CircuitReader(files, use).Read(root.Find("circuit")),
            Labels = LabelReader.Free(labels),
            LabelFeed = new LabelReader(files).Feed(labels, draft),
        };
        return draft;
    }

    /// <summary>The charter of a draft that has no problem.</summary>
    public static Charter Build(CharterDraft draft, string text, string sha256)
    {
        List<GroupField> groups = draft.Groups!.ConvertAll(g => g.Value);
        return draft.Settings with
        {
            Groups = groups,
            Groupings = [.. groups.Select((g, i) => new Grouping(g.Name, [i])), .. draft.Intersections.Select(i => Crossed(i.Names, groups))],
            Inputs = draft.Inputs!.ConvertAll(i => i.Value),
            Slices = draft.Slices.ConvertAll(s => s.Value),
            Alerts = draft.Alerts.ConvertAll(a => a.Value.Rule),
            Rules = draft.Rules.ConvertAll(r => r.Value),
            Adjust = draft.Adjust.ConvertAll(a => a.Value),
            OutcomeNoise = draft.OutcomeNoise.ConvertAll(n => n.Value),
            Text = text,
            Sha256 = sha256,
        };
    }

    private static Grouping Crossed(IReadOnlyList<string> names, List<GroupField> groups) =>
        new(string.Join('+', names), [.. names.Select(n => groups.FindIndex(g => g.Name == n))]);
}
