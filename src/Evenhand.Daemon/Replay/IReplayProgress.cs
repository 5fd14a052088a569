namespace Evenhand.Daemon.Replay;

/// <summary>Is told how far a replay has come.</summary>
internal interface IReplayProgress
{
    /// <summary>Tells of bytes read of an input.</summary>
    /// <param name="input">Index of the input.</param>
    /// <param name="name">Its name.</param>
    /// <param name="bytes">Bytes read so far.</param>
    /// <param name="length">Bytes altogether; null where not known.</param>
    void Report(int input, string name, long bytes, long? length);
}
