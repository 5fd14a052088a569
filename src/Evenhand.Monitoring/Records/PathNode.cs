namespace Evenhand.Monitoring.Records;

/// <summary>A node of <see cref="PathTrie"/>.</summary>
internal sealed class PathNode
{
    /// <summary>The slot whose value stands here; −1 where the node only leads on.</summary>
    public int Slot { get; set; } = -1;

    /// <summary>Members that lead on, by name, to the number of their node.</summary>
    public TextTable Names { get; } = new();

    /// <summary>Array elements that lead on, by index, in ascending order.</summary>
    public List<(int Index, int Child)> Elements { get; } = [];

    /// <summary>The serial number of the last record in which the node was reached.</summary>
    public long SeenIn { get; set; } = -1;

    /// <summary>What the keys of earlier records looked like here.</summary>
    public KeyMemory Keys { get; } = new();

    /// <summary>Whether anything below is read.</summary>
    public bool IsInner => Names.Count > 0;
}
