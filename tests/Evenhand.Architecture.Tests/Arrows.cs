using ArchUnitNET.Domain;
using ArchUnitNET.Loader;

namespace Evenhand.Architecture.Tests;

/// <summary>Who depends on whom, read from the compiled code.</summary>
internal static class Arrows
{
    public static readonly System.Reflection.Assembly[] Projects =
    [
        System.Reflection.Assembly.Load("Evenhand.Circuits"),
        System.Reflection.Assembly.Load("Evenhand.Statistics"),
        System.Reflection.Assembly.Load("Evenhand.Monitoring"),
        System.Reflection.Assembly.Load("evenhand"),
    ];

    private static readonly ArchUnitNET.Domain.Architecture Code = new ArchLoader().LoadAssemblies(Projects).Build();

    /// <summary>Every dependency of a type of ours on another type, compiler-made types left out.</summary>
    public static IEnumerable<(IType From, IType To)> All() => Code.Types
        .Where(t => t.FullName.StartsWith("Evenhand.", StringComparison.Ordinal) && !t.FullName.Contains('<', StringComparison.Ordinal))
        .SelectMany(t => t.Dependencies.Select(d => (t, d.Target)));

    /// <summary>The project of a type, by its namespace: <c>Evenhand.Monitoring</c>.</summary>
    public static string ProjectOf(IType type) => string.Join('.', type.FullName.Split('.').Take(2));

    /// <summary>The folder of a type, by its namespace: <c>Evenhand.Monitoring.Windows</c>; the project itself for its root.</summary>
    public static string FolderOf(IType type)
    {
        string[] parts = type.Namespace?.FullName.Split('.') ?? [];
        return string.Join('.', parts.Take(3));
    }

    /// <summary>A cycle among arrows, as the nodes along it; empty where there is none.</summary>
    public static IReadOnlyList<string> CycleIn(IReadOnlyCollection<(string From, string To)> arrows)
    {
        HashSet<string> done = [];
        foreach (string start in arrows.Select(a => a.From).Distinct())
        {
            List<string> path = [];
            if (Walk(start, arrows, path, done))
            {
                return path;
            }
        }

        return [];
    }

    private static bool Walk(string node, IReadOnlyCollection<(string From, string To)> arrows, List<string> path, HashSet<string> done)
    {
        if (path.Contains(node))
        {
            path.Add(node);
            return true;
        }

        if (done.Contains(node))
        {
            return false;
        }

        path.Add(node);
        foreach ((_, string to) in arrows.Where(a => a.From == node))
        {
            if (Walk(to, arrows, path, done))
            {
                return true;
            }
        }

        path.RemoveAt(path.Count - 1);
        done.Add(node);
        return false;
    }
}
