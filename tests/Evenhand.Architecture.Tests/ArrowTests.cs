using ArchUnitNET.Domain;
using Xunit;

namespace Evenhand.Architecture.Tests;

public sealed class ArrowTests
{
    private static readonly Dictionary<string, string[]> AllowedProjects = new()
    {
        ["Evenhand.Circuits"] = [],
        ["Evenhand.Statistics"] = [],
        ["Evenhand.Monitoring"] = ["Evenhand.Circuits", "Evenhand.Statistics"],
        ["Evenhand.Daemon"] = ["Evenhand.Monitoring", "Evenhand.Circuits", "Evenhand.Statistics"],
    };

    /// <summary>What pure code must not touch: the world, and clocks.</summary>
    private static readonly string[] Impure =
    [
        "System.IO.File", "System.IO.FileInfo", "System.IO.FileStream", "System.IO.Directory", "System.IO.DirectoryInfo", "System.IO.Path",
        "System.Net.", "System.Console", "System.Environment", "System.Diagnostics.Process", "System.Diagnostics.Stopwatch", "System.TimeProvider",
        "System.Threading.Thread", "System.Threading.Timer", "System.Threading.Tasks.Task", "Microsoft.Data.", "Microsoft.Extensions.", "Dapper.",
    ];

    [Fact]
    public void Projects_EveryDependency_PointsInwards()
    {
        string[] wrong =
        [
            .. Arrows.All()
                .Where(a => Arrows.ProjectOf(a.To).StartsWith("Evenhand.", StringComparison.Ordinal) && Arrows.ProjectOf(a.From) != Arrows.ProjectOf(a.To))
                .Where(a => !AllowedProjects[Arrows.ProjectOf(a.From)].Contains(Arrows.ProjectOf(a.To)))
                .Select(a => $"{a.From.FullName} uses {a.To.FullName}")
                .Distinct(),
        ];
        Assert.Empty(wrong);
    }

    [Theory]
    [InlineData("Evenhand.Statistics")]
    [InlineData("Evenhand.Monitoring")]
    [InlineData("Evenhand.Daemon")]
    public void Folders_OfOneProject_HaveNoCycle(string project)
    {
        (string From, string To)[] arrows =
        [
            .. Arrows.All()
                .Where(a => Arrows.ProjectOf(a.From) == project && Arrows.ProjectOf(a.To) == project)
                .Select(a => (Arrows.FolderOf(a.From), Arrows.FolderOf(a.To)))
                .Where(a => a.Item1 != a.Item2)
                .Distinct(),
        ];
        Assert.NotEmpty(arrows);
        Assert.Empty(Arrows.CycleIn(arrows));
    }

    [Theory]
    [InlineData("Evenhand.Circuits")]
    [InlineData("Evenhand.Statistics")]
    [InlineData("Evenhand.Monitoring")]
    public void PureProjects_NoType_TouchesTheWorld(string project)
    {
        string[] wrong =
        [
            .. Arrows.All()
                .Where(a => Arrows.ProjectOf(a.From) == project && Impure.Any(i => IsOf(a.To, i)))
                .Select(a => $"{a.From.FullName} uses {a.To.FullName}")
                .Distinct(),
        ];
        Assert.Empty(wrong);
    }

    [Theory]
    [InlineData("Evenhand.Circuits")]
    [InlineData("Evenhand.Statistics")]
    [InlineData("Evenhand.Monitoring")]
    public void PureProjects_NoStaticField_CanChange(string project)
    {
        string[] wrong =
        [
            .. Arrows.Projects.Single(p => p.GetName().Name == project).GetTypes()
                .Where(t => t.FullName!.StartsWith("Evenhand.", StringComparison.Ordinal) && !t.FullName.Contains('<', StringComparison.Ordinal))
                .SelectMany(t => t.GetFields(System.Reflection.BindingFlags.Static | System.Reflection.BindingFlags.NonPublic | System.Reflection.BindingFlags.Public))
                .Where(f => !f.IsInitOnly && !f.IsLiteral && !f.Name.Contains('<', StringComparison.Ordinal))
                .Where(f => f.DeclaringType!.BaseType?.Name != "JsonSerializerContext")
                .Select(f => $"{f.DeclaringType!.FullName}.{f.Name}"),
        ];
        Assert.Empty(wrong);
    }

    [Fact]
    public void CycleIn_ArrowsWithACycle_NamesIt() =>
        Assert.Equal(["a", "b", "c", "a"], Arrows.CycleIn([("a", "b"), ("b", "c"), ("c", "a"), ("b", "d")]));

    private static bool IsOf(IType type, string name) =>
        name.EndsWith('.') ? type.FullName.StartsWith(name, StringComparison.Ordinal) : type.FullName == name;
}
