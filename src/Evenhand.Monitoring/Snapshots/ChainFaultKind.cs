namespace Evenhand.Monitoring.Snapshots;

/// <summary>What is wrong at one place of a chain.</summary>
public enum ChainFaultKind
{
    /// <summary>The file holds no snapshot at all.</summary>
    Empty,

    /// <summary>A line is empty.</summary>
    BlankLine,

    /// <summary>A line is no JSON object, or no I-JSON.</summary>
    Unparseable,

    /// <summary>A line is JSON, but not in the canonical form that was sealed (re-spaced, reordered, rewritten numbers).</summary>
    NotCanonical,

    /// <summary>A line's <c>format</c> is absent or none that this program knows.</summary>
    UnknownFormat,

    /// <summary>A key that the chain rests on is absent or malformed.</summary>
    Malformed,

    /// <summary>The contents do not give the hash that stands in the snapshot.</summary>
    HashDiffers,

    /// <summary>The state does not give the hash that was sealed for it.</summary>
    StateHashDiffers,

    /// <summary>The circuit does not give the hash that was sealed for it.</summary>
    CircuitHashDiffers,

    /// <summary>A snapshot does not follow on the one before it.</summary>
    PreviousHashDiffers,

    /// <summary>The chain does not start at sequence 1.</summary>
    StartMissing,

    /// <summary>One or more sequences are missing.</summary>
    SequenceGap,

    /// <summary>A sequence occurs more than once.</summary>
    SequenceRepeated,

    /// <summary>A snapshot stands after later ones.</summary>
    SequenceOutOfOrder,

    /// <summary>The signature does not belong to these contents and this key.</summary>
    SignatureWrong,

    /// <summary>A snapshot is signed, but with another key than the trusted one.</summary>
    SigningKeyUntrusted,

    /// <summary>A signature that must be there is not.</summary>
    SignatureMissing,

    /// <summary>The head kept elsewhere is nowhere in the file: its tail was cut, or the chain was written anew.</summary>
    HeadDiffers,

    /// <summary>The head kept elsewhere is in the file, but the file goes on after it.</summary>
    HeadNotLast,
}
