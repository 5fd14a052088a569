using Evenhand.Daemon.Commands;
using Evenhand.Daemon.Hosting;
using Microsoft.Extensions.Hosting;

namespace Evenhand.Daemon;

/// <summary>The executable: composes the host and runs one command.</summary>
internal static class Program
{
    private static int Main(string[] args)
    {
        using IHost host = EvenhandHost.Build();
        return new CommandLine(host.Services).Run(args);
    }
}
