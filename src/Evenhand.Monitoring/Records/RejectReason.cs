namespace Evenhand.Monitoring.Records;

/// <summary>Why a record could not be used. The numbers are stored and the texts published: neither ever changes.</summary>
public enum RejectReason : byte
{
    /// <summary>Not rejected.</summary>
    None = 0,

    /// <summary>Not JSON by RFC 8259.</summary>
    MalformedJson = 1,

    /// <summary>Bytes that are not UTF-8.</summary>
    InvalidUtf8 = 2,

    /// <summary>Longer than the limit of one record.</summary>
    TooLong = 3,

    /// <summary>Nested deeper than the limit.</summary>
    TooDeep = 4,

    /// <summary>A member that the charter reads stands twice in its object.</summary>
    DuplicateKey = 5,

    /// <summary>A JSON value, but no object.</summary>
    NotAnObject = 6,

    /// <summary>A line without anything on it.</summary>
    BlankLine = 7,

    /// <summary>A row with fewer or more cells than the header.</summary>
    RaggedRow = 8,

    /// <summary>No id where the charter looks for one.</summary>
    MissingId = 9,

    /// <summary>An id that is neither text nor a number, or a revision that is neither.</summary>
    BadId = 10,

    /// <summary>No time where the charter looks for one.</summary>
    MissingTime = 11,

    /// <summary>A time that is not in the charter's notation, or out of range.</summary>
    BadTime = 12,

    /// <summary>No decision where the charter looks for one.</summary>
    MissingDecision = 13,

    /// <summary>A decision that is in none of the charter's three lists.</summary>
    UnknownDecision = 14,

    /// <summary>A string with an escaped surrogate that lacks its partner, where the charter reads it.</summary>
    LoneSurrogate = 15,

    /// <summary>An outcome record without an outcome.</summary>
    MissingOutcome = 16,

    /// <summary>An outcome in neither of the charter's two lists.</summary>
    UnknownOutcome = 17,
}
