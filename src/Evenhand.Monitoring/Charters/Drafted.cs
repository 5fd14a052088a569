namespace Evenhand.Monitoring.Charters;

/// <summary>A part of a charter as read, with its mapping, so that cross-checks can point at it.</summary>
/// <param name="Value">The part; defaults stand where something is wrong.</param>
/// <param name="Map">The mapping it was read from.</param>
/// <param name="IsSound">Whether reading it found no problem; cross-checks pass over what is already wrong.</param>
internal sealed record Drafted<T>(T Value, MapReader Map, bool IsSound)
{
    /// <summary>Reads a part and notes whether it is sound.</summary>
    public static Drafted<T> Read(MapReader map, int problemsBefore, Func<MapReader, T> read)
    {
        T value = read(map);
        return new(value, map, map.ProblemCount == problemsBefore);
    }
}
