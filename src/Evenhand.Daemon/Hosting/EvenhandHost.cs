using Microsoft.Extensions.DependencyInjection;
using Microsoft.Extensions.Hosting;
using Microsoft.Extensions.Logging;

namespace Evenhand.Daemon.Hosting;

/// <summary>The host that every command runs in.</summary>
internal static class EvenhandHost
{
    /// <summary>Composes the host. Logs go to stderr; a command's own words do not pass through the log.</summary>
    public static IHost Build()
    {
        HostApplicationBuilder builder = Host.CreateEmptyApplicationBuilder(new HostApplicationBuilderSettings { ApplicationName = "evenhand" });
        string? level = Environment.GetEnvironmentVariable("EVENHAND_LOG");
        builder.Logging.AddSimpleConsole();
        builder.Logging.AddConsole(o => o.LogToStandardErrorThreshold = LogLevel.Trace);
        builder.Logging.SetMinimumLevel(Enum.TryParse(level, ignoreCase: true, out LogLevel minimum) ? minimum : LogLevel.Warning);
        builder.Services.AddSingleton(TimeProvider.System);
        builder.Services.AddSingleton<Terminal>();
        return builder.Build();
    }
}
