using System.Globalization;

namespace Evenhand.Daemon.Hosting;

/// <summary>A bar on a terminal, redrawn a few times a second and wiped at the end.</summary>
internal sealed class ProgressBar(TextWriter terminal, TimeProvider clock) : IDisposable
{
    private const int Width = 30;
    private static readonly TimeSpan Interval = TimeSpan.FromMilliseconds(100);

    private long? _drawn;
    private int _length;

    /// <summary>States how far a piece of work is.</summary>
    /// <param name="what">The work.</param>
    /// <param name="share">The share done, 0 to 1; NaN where nobody knows.</param>
    /// <param name="note">What else to say.</param>
    public void Report(string what, double share, string note = "")
    {
        if (_drawn is { } drawn && clock.GetElapsedTime(drawn) < Interval)
        {
            return;
        }

        _drawn = clock.GetTimestamp();
        int filled = double.IsNaN(share) ? 0 : (int)(Math.Clamp(share, 0, 1) * Width);
        Draw(double.IsNaN(share)
            ? $"{what} {note}"
            : string.Create(CultureInfo.InvariantCulture, $"{what} [{new string('#', filled)}{new string('.', Width - filled)}] {Math.Clamp(share, 0, 1):0 %} {note}"));
    }

    /// <summary>Wipes the bar.</summary>
    public void Dispose()
    {
        if (_drawn is not null)
        {
            Draw("");
            terminal.Write('\r');
        }
    }

    private void Draw(string line)
    {
        terminal.Write('\r' + line.PadRight(_length));
        _length = line.Length;
    }
}
