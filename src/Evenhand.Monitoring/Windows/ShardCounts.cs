using System.Text.Json.Serialization;

namespace Evenhand.Monitoring.Windows;

/// <summary>What became of the records of a shard: every record read stands in exactly one of the other counts.</summary>
public sealed class ShardCounts
{
    /// <summary>Records read.</summary>
    public long Read { get; set; }

    /// <summary>Favourable and unfavourable decisions that went into the sums.</summary>
    public long Used { get; set; }

    /// <summary>Decisions that are neither: counted, outside all rates.</summary>
    public long Other { get; set; }

    /// <summary>Records that could not be read as the charter asks.</summary>
    public long Rejected { get; set; }

    /// <summary>Records older than the charter's <c>lateness</c>.</summary>
    public long Late { get; set; }

    /// <summary>Records further ahead than the charter's <c>ahead</c>.</summary>
    public long Ahead { get; set; }

    /// <summary>Records whose id was seen before.</summary>
    public long Duplicate { get; set; }

    /// <summary>Records that wait for their label.</summary>
    public long Held { get; set; }

    /// <summary>Records at or after the as-of.</summary>
    public long Excluded { get; set; }

    /// <summary>Rejected records by <see cref="Records.RejectReason"/>.</summary>
    public long[] ByReason { get; init; } = new long[Records.RejectReasonNames.Count];

    /// <summary>Outcomes of an outcomes file that found their decision.</summary>
    public long OutcomesMatched { get; set; }

    /// <summary>Outcomes that came before the decision or later than the charter's <c>within</c> allows.</summary>
    public long OutcomesOutside { get; set; }

    /// <summary>Decisions that took a label from the feed of labels.</summary>
    public long LabelsFilled { get; set; }

    /// <summary>Decisions whose label came later than the feed's <c>wait</c> allows, or is not known yet at the as-of.</summary>
    public long LabelsLate { get; set; }

    /// <summary>Whether every record read stands in exactly one count.</summary>
    [JsonIgnore]
    public bool AddUp => Read == Used + Other + Rejected + Late + Ahead + Duplicate + Held + Excluded;
}
