namespace Evenhand.Monitoring.Records;

/// <summary>A value of the record at hand, as a stretch of the bytes it was found in.</summary>
/// <param name="Kind">What it is.</param>
/// <param name="Start">First byte; of a string the one after its quotation mark.</param>
/// <param name="Length">Number of bytes.</param>
internal readonly record struct RecordValue(ValueKind Kind, int Start, int Length)
{
    /// <summary>The value's text.</summary>
    public ReadOnlySpan<byte> Of(ReadOnlySpan<byte> bytes) => bytes.Slice(Start, Length);

    /// <summary>Whether there is a value at all.</summary>
    public bool IsPresent => Kind > ValueKind.Null;
}
