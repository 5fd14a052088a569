namespace Evenhand.Monitoring.Charters;

/// <summary>A charter while it is read and checked: its parts with their places.</summary>
internal sealed class CharterDraft(MapReader root, CharterUse use)
{
    /// <summary>The whole mapping.</summary>
    public MapReader Root { get; } = root;

    /// <summary>What it is read for.</summary>
    public CharterUse Use { get; } = use;

    /// <summary>The parts that stand alone; lists are filled in when the charter is built.</summary>
    public required Charter Settings { get; set; }

    /// <summary>Groups; null if unreadable as a list.</summary>
    public List<Drafted<GroupField>>? Groups { get; set; } = [];

    /// <summary>Inputs; null if unreadable as a list.</summary>
    public List<Drafted<InputField>>? Inputs { get; set; } = [];

    /// <summary>Slices.</summary>
    public List<Drafted<SliceField>> Slices { get; set; } = [];

    /// <summary>Intersections by names of groups, each with its node.</summary>
    public List<(IReadOnlyList<string> Names, KeyedNode At)> Intersections { get; set; } = [];

    /// <summary>Alert rules.</summary>
    public List<Drafted<AlertDraft>> Alerts { get; set; } = [];

    /// <summary>Deciding models.</summary>
    public List<Drafted<DecisionRule>> Rules { get; set; } = [];

    /// <summary>Adjustment fields.</summary>
    public List<Drafted<AdjustField>> Adjust { get; set; } = [];

    /// <summary>Error rates of the outcome.</summary>
    public List<Drafted<OutcomeNoise>> OutcomeNoise { get; set; } = [];

    /// <summary>Every coded field that could be read, groups first.</summary>
    public IEnumerable<Drafted<CodedField>> Fields =>
        (Groups ?? []).Select(g => new Drafted<CodedField>(g.Value, g.Map, g.IsSound))
        .Concat((Inputs ?? []).Select(i => new Drafted<CodedField>(i.Value, i.Map, i.IsSound)));

    /// <summary>The group of a name, or null.</summary>
    public Drafted<GroupField>? Group(string name) => Groups?.Find(g => g.Value.Name == name);

    /// <summary>The groups of a grouping's name (<c>a</c> or <c>a+b</c>), or null if there is no such grouping.</summary>
    public IReadOnlyList<Drafted<GroupField>>? Grouping(string name)
    {
        if (Group(name) is { } single)
        {
            return [single];
        }

        foreach ((IReadOnlyList<string> names, _) in Intersections)
        {
            if (string.Join('+', names) == name)
            {
                List<Drafted<GroupField>> groups = [.. names.Select(Group).OfType<Drafted<GroupField>>()];
                return groups.Count == names.Count ? groups : null;
            }
        }

        return null;
    }

    /// <summary>The names of every grouping.</summary>
    public IEnumerable<string> GroupingNames =>
        (Groups ?? []).Select(g => g.Value.Name).Where(n => n.Length > 0).Concat(Intersections.Select(i => string.Join('+', i.Names)));
}
