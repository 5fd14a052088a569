using Evenhand.Daemon.Commands;
using Evenhand.Daemon.Replay;
using Evenhand.Monitoring.Charters;

namespace Evenhand.Daemon.Tests.Replay;

/// <summary>Runs replays inside the test's process.</summary>
internal static class InProcessReplay
{
    /// <summary>2031-01-01T00:00:00Z, in microseconds since 1970: what records without a time stand for.</summary>
    private const long AsOf = 1_924_992_000_000_000;

    /// <summary>Replays inputs under a charter file; a charter without time is read as of <see cref="AsOf"/>.</summary>
    public static ReplayedSnapshot Run(string charterFile, params string[] inputs)
    {
        Charter charter = CharterFile.Load(charterFile, CharterUse.Monitoring);
        ReplayRequest request = new()
        {
            Charter = charterFile,
            Inputs = inputs,
            AsOf = charter.Time is null ? AsOf : null,
        };
        return new ReplayedSnapshot(new ReplayRun(charter, request, TimeProvider.System, progress: null).RunAlone().Snapshot.Bytes);
    }
}
