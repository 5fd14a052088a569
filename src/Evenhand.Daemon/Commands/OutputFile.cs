namespace Evenhand.Daemon.Commands;

/// <summary>A file that a command writes: beside its place first, and put there only when it is complete.</summary>
/// <remarks>So a run that fails leaves what stood there before, and nothing is written over a file that the run reads.</remarks>
internal sealed class OutputFile : IDisposable
{
    private readonly string _path;
    private readonly string _named;
    private readonly string? _part;
    private readonly FileStream _stream;

    private OutputFile(string path, string named, string? part, FileStream stream) => (_path, _named, _part, _stream) = (path, named, part, stream);

    /// <summary>What is written.</summary>
    public Stream Stream => _stream;

    /// <summary>Opens a place for writing, before any work is done.</summary>
    /// <param name="option">The option that names it, for messages.</param>
    /// <param name="path">The place.</param>
    /// <param name="inUse">Files that the command reads or keeps; null and <c>-</c> stand for none.</param>
    /// <exception cref="CommandFailure">It is one of those, or cannot be written.</exception>
    public static OutputFile Open(string option, string path, IEnumerable<string?> inUse)
    {
        if (path == "-")
        {
            throw new CommandFailure(2, $"{option} -: name a file; --json prints to stdout");
        }

        string real = RealPath(path);
        if (inUse.FirstOrDefault(other => other is not null and not "-" && RealPath(other) == real) is { } other)
        {
            throw new CommandFailure(2, $"{option} {path}: would overwrite {other}, which the command reads or keeps; name another file");
        }

        try
        {
            // A device cannot be replaced by another file.
            string? part = real.StartsWith("/dev/", StringComparison.Ordinal) ? null : $"{real}.part-{Environment.ProcessId}";
            return Directory.Exists(real)
                ? throw new CommandFailure(3, $"{path}: cannot be written (it is a folder)")
                : new OutputFile(real, path, part, new FileStream(part ?? real, part is null ? FileMode.Open : FileMode.Create, FileAccess.Write, FileShare.Read));
        }
        catch (Exception e) when (e is IOException or UnauthorizedAccessException)
        {
            throw Unwritable(path, e);
        }
    }

    /// <summary>Puts the file in its place.</summary>
    public void Complete()
    {
        try
        {
            _stream.Dispose();
            if (_part is not null)
            {
                File.Move(_part, _path, overwrite: true);
            }
        }
        catch (Exception e) when (e is IOException or UnauthorizedAccessException)
        {
            throw Unwritable(_named, e);
        }
    }

    /// <summary>Takes away what was not completed.</summary>
    public void Dispose()
    {
        _stream.Dispose();
        if (_part is not null)
        {
            File.Delete(_part);
        }
    }

    private static CommandFailure Unwritable(string path, Exception e) => new(3, $"{path}: cannot be written ({e.Message})");

    private static string RealPath(string path)
    {
        string full = Path.GetFullPath(path);
        try
        {
            // Folders on the way may be links too.
            string folder = Path.GetDirectoryName(full) is { } parent && Directory.ResolveLinkTarget(parent, returnFinalTarget: true) is { } target ? target.FullName : Path.GetDirectoryName(full) ?? "/";
            string inFolder = Path.Combine(folder, Path.GetFileName(full));
            return File.ResolveLinkTarget(inFolder, returnFinalTarget: true)?.FullName ?? inFolder;
        }
        catch (IOException)
        {
            return full;
        }
    }
}
