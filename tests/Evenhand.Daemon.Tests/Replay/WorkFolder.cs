namespace Evenhand.Daemon.Tests.Replay;

/// <summary>A folder of its own for the files of one test.</summary>
internal sealed class WorkFolder : IDisposable
{
    private readonly DirectoryInfo _folder = Directory.CreateTempSubdirectory("evenhand-replay-");

    /// <summary>The path of a file of this name in the folder.</summary>
    public string At(string name) => Path.Combine(_folder.FullName, name);

    /// <summary>Writes a text file and returns its path.</summary>
    public string Write(string name, string text)
    {
        File.WriteAllText(At(name), text);
        return At(name);
    }

    public void Dispose() => _folder.Delete(recursive: true);
}
