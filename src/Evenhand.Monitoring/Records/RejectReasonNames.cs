namespace Evenhand.Monitoring.Records;

/// <summary>The published texts of <see cref="RejectReason"/>.</summary>
public static class RejectReasonNames
{
    /// <summary>Number of reasons, <see cref="RejectReason.None"/> among them.</summary>
    public const int Count = 18;

    /// <summary>The published text of a reason, such as <c>unknown_decision</c>.</summary>
    /// <exception cref="ArgumentOutOfRangeException">Not a reason.</exception>
    public static string Name(this RejectReason reason) => reason switch
    {
        RejectReason.MalformedJson => "malformed_json",
        RejectReason.InvalidUtf8 => "invalid_utf8",
        RejectReason.TooLong => "too_long",
        RejectReason.TooDeep => "too_deep",
        RejectReason.DuplicateKey => "duplicate_key",
        RejectReason.NotAnObject => "not_an_object",
        RejectReason.BlankLine => "blank_line",
        RejectReason.RaggedRow => "ragged_row",
        RejectReason.MissingId => "missing_id",
        RejectReason.BadId => "bad_id",
        RejectReason.MissingTime => "missing_time",
        RejectReason.BadTime => "bad_time",
        RejectReason.MissingDecision => "missing_decision",
        RejectReason.UnknownDecision => "unknown_decision",
        RejectReason.LoneSurrogate => "lone_surrogate",
        RejectReason.MissingOutcome => "missing_outcome",
        RejectReason.UnknownOutcome => "unknown_outcome",
        _ => throw new ArgumentOutOfRangeException(nameof(reason), reason, "not a reason for rejection"),
    };
}
