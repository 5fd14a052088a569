using Evenhand.Monitoring.Charters;

namespace Evenhand.Daemon.Commands;

/// <summary>Reads charters from files.</summary>
internal static class CharterFile
{
    /// <summary>Reads a charter and reports its problems.</summary>
    /// <param name="path">The file; names inside it are relative to its folder.</param>
    /// <param name="use">What it is read for.</param>
    /// <exception cref="CommandFailure">The file cannot be read.</exception>
    public static CharterResult Read(string path, CharterUse use)
    {
        byte[] bytes;
        try
        {
            bytes = File.ReadAllBytes(path);
        }
        catch (Exception e) when (e is FileNotFoundException or DirectoryNotFoundException)
        {
            throw new CommandFailure(2, $"{path}: no such file; check the name");
        }
        catch (Exception e) when (e is IOException or UnauthorizedAccessException)
        {
            throw new CommandFailure(2, $"{path}: cannot be read ({e.Message}); check that it is a file and its permissions");
        }

        string folder = Path.GetDirectoryName(Path.GetFullPath(path))!;
        return CharterParser.Parse(path, bytes, use, file => File.Exists(Path.Combine(folder, file)));
    }

    /// <summary>Reads a charter that must be right.</summary>
    /// <exception cref="CommandFailure">It cannot be read, or has problems: they are the message, a line each.</exception>
    public static Charter Load(string path, CharterUse use)
    {
        CharterResult result = Read(path, use);
        return result.Charter ?? throw new CommandFailure(2, string.Join(Environment.NewLine, result.Problems), isPlaced: true);
    }
}
