using Evenhand.Monitoring.Charters;

namespace Evenhand.Monitoring.Records;

/// <summary>The order of the coded fields of an encoded record: groups in charter order, then inputs.</summary>
public sealed class RecordLayout
{
    /// <summary>Lays out the records of a charter.</summary>
    /// <param name="charter">The charter.</param>
    /// <param name="collectNumbers">Whether the numbers of numeric fields are to be kept beside their codes, one record at a time.</param>
    public RecordLayout(Charter charter, bool collectNumbers = false)
    {
        ArgumentNullException.ThrowIfNull(charter);
        Groups = charter.Groups.Count;
        Slices = charter.Slices.Count;
        Fields = [.. charter.Groups, .. charter.Inputs];
        HasScore = charter.Score is not null;
        Numbers = collectNumbers ? new NumberSample(Fields.Count) : null;
    }

    /// <summary>The coded fields: groups first.</summary>
    public IReadOnlyList<CodedField> Fields { get; }

    /// <summary>Number of group fields; they are the first of <see cref="Fields"/>.</summary>
    public int Groups { get; }

    /// <summary>Number of slice fields.</summary>
    public int Slices { get; }

    /// <summary>Whether records carry a score.</summary>
    public bool HasScore { get; }

    /// <summary>The numbers of the record decoded last; null unless they are collected.</summary>
    public NumberSample? Numbers { get; }
}
