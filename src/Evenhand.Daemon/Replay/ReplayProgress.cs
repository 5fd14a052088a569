using System.Globalization;

namespace Evenhand.Daemon.Replay;

/// <summary>A bar on a terminal, redrawn a few times a second and wiped at the end.</summary>
internal sealed class ReplayProgress(TextWriter terminal, TimeProvider clock) : IReplayProgress, IDisposable
{
    private const int Width = 30;
    private static readonly TimeSpan Interval = TimeSpan.FromMilliseconds(100);

    private long? _drawn;
    private int _length;

    /// <inheritdoc/>
    public void Report(int input, string name, long bytes, long? length)
    {
        if (_drawn is { } drawn && clock.GetElapsedTime(drawn) < Interval)
        {
            return;
        }

        _drawn = clock.GetTimestamp();
        Draw(Line(name, bytes, length));
    }

    /// <inheritdoc/>
    public void Dispose()
    {
        if (_drawn is not null)
        {
            Draw("");
            terminal.Write('\r');
        }
    }

    private static string Line(string name, long bytes, long? length)
    {
        string megabytes = string.Create(CultureInfo.InvariantCulture, $"{bytes / 1e6:0.0} MB");
        if (length is null or 0)
        {
            return $"{name} {megabytes}";
        }

        double share = Math.Clamp((double)bytes / length.Value, 0, 1);
        int filled = (int)(share * Width);
        return string.Create(CultureInfo.InvariantCulture, $"{name} [{new string('#', filled)}{new string('.', Width - filled)}] {share:0 %} {megabytes}");
    }

    private void Draw(string line)
    {
        terminal.Write('\r' + line.PadRight(_length));
        _length = line.Length;
    }
}
