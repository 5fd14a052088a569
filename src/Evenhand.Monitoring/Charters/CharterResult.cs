namespace Evenhand.Monitoring.Charters;

/// <summary>What came of reading a charter.</summary>
/// <param name="Charter">The charter; null if there is any problem.</param>
/// <param name="Problems">Every problem, in the order of the file.</param>
public sealed record CharterResult(Charter? Charter, IReadOnlyList<CharterProblem> Problems);
