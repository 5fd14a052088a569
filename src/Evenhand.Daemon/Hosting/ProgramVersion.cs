using System.Reflection;

namespace Evenhand.Daemon.Hosting;

/// <summary>The version of this program.</summary>
internal static class ProgramVersion
{
    /// <summary>The version without a commit, such as <c>0.1.0</c>: evidence is the same byte for byte whoever built it.</summary>
    public static string Text { get; } =
        typeof(ProgramVersion).Assembly.GetCustomAttribute<AssemblyInformationalVersionAttribute>()!.InformationalVersion.Split('+')[0];
}
