using System.CommandLine;
using System.Reflection;
using Evenhand.Circuits.Files;
using Evenhand.Daemon.Hosting;
using Evenhand.Monitoring.Charters;
using Microsoft.Extensions.DependencyInjection;

namespace Evenhand.Daemon.Commands;

/// <summary><c>evenhand schema</c>: prints the JSON Schema of a format. The formats are those that the program carries.</summary>
internal static class SchemaCommand
{
    private const string Suffix = ".schema.json";

    /// <summary>The command.</summary>
    public static Command Create(IServiceProvider services)
    {
        Terminal terminal = services.GetRequiredService<Terminal>();
        Dictionary<string, Assembly> carriers = ((Assembly[])[typeof(CharterSchema).Assembly, typeof(CircuitReader).Assembly])
            .SelectMany(a => a.GetManifestResourceNames().Where(n => n.EndsWith(Suffix, StringComparison.Ordinal)).Select(n => (Name: n[..^Suffix.Length], Assembly: a)))
            .ToDictionary(r => r.Name, r => r.Assembly);
        string[] names = [.. carriers.Keys.Order(StringComparer.Ordinal)];
        Argument<string> name = new("FORMAT") { Description = $"One of: {string.Join(", ", names)}." };
        name.AcceptOnlyFromAmong(names);
        Command command = new("schema", "Prints the JSON Schema of a format.");
        command.Arguments.Add(name);
        command.SetAction(parsed =>
        {
            using StreamReader reader = new(carriers[parsed.GetRequiredValue(name)].GetManifestResourceStream(parsed.GetRequiredValue(name) + Suffix)!);
            terminal.Out.Write(reader.ReadToEnd());
            return 0;
        });
        return command;
    }
}
