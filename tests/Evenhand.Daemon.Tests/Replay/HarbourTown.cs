using System.Globalization;
using System.Text;

namespace Evenhand.Daemon.Tests.Replay;

/// <summary>Flood-repair grants in a made-up harbour town: a charter and small streams of decisions.</summary>
internal static class HarbourTown
{
    /// <summary>The charter; an alert on the ratio of the hill's rate to the river's.</summary>
    public const string Charter = """
        charter: flood-grants
        title: Flood-repair grants, fast-track decisions
        id: /case
        time: /decided_at
        decision: { at: /decision, favourable: [fast_track], unfavourable: [manual_review], other: [withdrawn] }
        outcome: { at: /upheld, positive: [true], negative: [false], within: 30d }
        groups:
          - { name: language, at: /language, values: [river, hill, coast], reference: river, declined: [not_stated] }
        windows: [1h, 24h]
        lateness: 1h
        ahead: 30m
        alerts:
          - { name: language-ratio, measure: impact_ratio, grouping: language, window: all, below: 0.8, severity: page }
        """;

    private static readonly DateTimeOffset Start = new(2031, 3, 1, 6, 0, 0, TimeSpan.Zero);

    /// <summary>One decision as a line of JSON; minutes count from 2031-03-01T06:00:00Z.</summary>
    public static string Record(string id, double minute, string language, string decision) =>
        $$"""{"case":"{{id}}","decided_at":"{{At(minute)}}","language":"{{language}}","decision":"{{decision}}"}""" + "\n";

    /// <summary>A stream of a decision a minute: river and hill in turn, with these shares of ten decided favourably.</summary>
    public static string Stream(int records, int river, int hill)
    {
        StringBuilder lines = new();
        for (int i = 0; i < records; i++)
        {
            bool isRiver = i % 2 == 0;
            bool isFavourable = i / 2 % 10 < (isRiver ? river : hill);
            lines.Append(Record(CaseOf(i), i, isRiver ? "river" : "hill", isFavourable ? "fast_track" : "manual_review"));
        }

        return lines.ToString();
    }

    /// <summary>The id of a record of <see cref="Stream"/>.</summary>
    public static string CaseOf(int record) => string.Create(CultureInfo.InvariantCulture, $"c{record}");

    /// <summary>An instant, in RFC 3339.</summary>
    public static string At(double minute) => Start.AddMinutes(minute).ToString("yyyy-MM-ddTHH:mm:ssZ", CultureInfo.InvariantCulture);
}
