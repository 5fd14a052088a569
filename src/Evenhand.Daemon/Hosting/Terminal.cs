namespace Evenhand.Daemon.Hosting;

/// <summary>Where commands write: results to one side, diagnostics and progress to the other.</summary>
internal sealed class Terminal
{
    /// <summary>Results; UTF-8 without a byte-order mark.</summary>
    public TextWriter Out { get; } = Console.Out;

    /// <summary>Diagnostics.</summary>
    public TextWriter Error { get; } = Console.Error;

    /// <summary>Whether progress may be drawn: only on a terminal.</summary>
    public bool ShowsProgress { get; } = !Console.IsErrorRedirected;

    /// <summary>Opens the results as bytes.</summary>
    public Stream OpenOut()
    {
        Out.Flush();
        return Console.OpenStandardOutput();
    }
}
