using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Records;

namespace Evenhand.Daemon.Sources;

/// <summary>How the records of an input are decoded.</summary>
/// <param name="Charter">The charter.</param>
/// <param name="Layout">Its layout.</param>
/// <param name="Hasher">The hash of ids.</param>
/// <param name="Kind">What the records are.</param>
internal sealed record Decoding(Charter Charter, RecordLayout Layout, IdHasher Hasher, RecordKind Kind);
