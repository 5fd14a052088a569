namespace Evenhand.Monitoring.Windows;

/// <summary>A record that went into no sum, kept track of by position and reason.</summary>
/// <param name="Input">Index of the input.</param>
/// <param name="Position">Position in the input, from 0.</param>
/// <param name="Reason">A text of <see cref="Records.RejectReasonNames"/>, or <c>late</c>, <c>ahead</c>.</param>
/// <param name="Bytes">The record as it came, where the charter keeps rejected records; else null.</param>
public readonly record struct RefusedEntry(int Input, long Position, string Reason, byte[]? Bytes = null);
