using System.Globalization;
using Evenhand.Daemon.Hosting;

namespace Evenhand.Daemon.Replay;

/// <summary>How far a replay has read, as a bar on a terminal.</summary>
internal sealed class ReplayProgress(TextWriter terminal, TimeProvider clock) : IReplayProgress, IDisposable
{
    private readonly ProgressBar _bar = new(terminal, clock);

    /// <inheritdoc/>
    public void Report(int input, string name, long bytes, long? length) => _bar.Report(
        name,
        length is null or 0 ? double.NaN : (double)bytes / length.Value,
        string.Create(CultureInfo.InvariantCulture, $"{bytes / 1e6:0.0} MB"));

    /// <inheritdoc/>
    public void Dispose() => _bar.Dispose();
}
