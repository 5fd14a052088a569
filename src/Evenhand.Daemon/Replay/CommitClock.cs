namespace Evenhand.Daemon.Replay;

/// <summary>Says when to commit: after a number of records or a second, whichever is first.</summary>
/// <param name="clock">The clock.</param>
/// <param name="records">Records between two commits, at most.</param>
internal sealed class CommitClock(TimeProvider clock, int records)
{
    private static readonly TimeSpan Interval = TimeSpan.FromSeconds(1);

    private long _since = clock.GetTimestamp();
    private int _records;

    /// <summary>Counts records and says whether a commit is due.</summary>
    public bool IsDue(int more)
    {
        _records += more;
        if (_records < records && clock.GetElapsedTime(_since) < Interval)
        {
            return false;
        }

        _records = 0;
        _since = clock.GetTimestamp();
        return true;
    }
}
