namespace Evenhand.Testing;

/// <summary>Finds the data files that lie under tests/data.</summary>
public static class TestData
{
    private static readonly Lazy<string> _root = new(FindRoot);

    /// <summary>The full path of a file or folder given relative to tests/data.</summary>
    public static string Path(string relative)
    {
        string path = System.IO.Path.Combine(_root.Value, relative);
        return System.IO.Path.Exists(path) ? path : throw new FileNotFoundException($"tests/data holds no '{relative}'.", path);
    }

    private static string FindRoot()
    {
        for (DirectoryInfo? folder = new(AppContext.BaseDirectory); folder is not null; folder = folder.Parent)
        {
            string candidate = System.IO.Path.Combine(folder.FullName, "tests", "data");
            if (File.Exists(System.IO.Path.Combine(candidate, "LICENSES.md")))
            {
                return candidate;
            }
        }

        throw new DirectoryNotFoundException($"No folder above {AppContext.BaseDirectory} has tests/data.");
    }
}
