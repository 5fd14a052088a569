namespace Evenhand.Monitoring.Charters.Yaml;

/// <summary>Something wrong with the notation itself.</summary>
/// <param name="Line">Line, from 1.</param>
/// <param name="Column">Column, from 1.</param>
/// <param name="Wrong">What is wrong.</param>
/// <param name="Mend">How to mend it.</param>
internal sealed record YamlFault(int Line, int Column, string Wrong, string Mend);
