using System.Diagnostics;
using Evenhand.Statistics.Distributions;

namespace Evenhand.Statistics.HypothesisTests;

/// <summary>The distribution of the events in the first of two groups when both margins are fixed.</summary>
internal readonly struct Hypergeometric
{
    private readonly long _secondGroup;
    private readonly long _events;

    /// <summary>Fixes the margins: both group sizes and the number of events, at most their sum.</summary>
    public Hypergeometric(long firstGroup, long secondGroup, long events)
    {
        Debug.Assert(events <= firstGroup + secondGroup, "More events than members.");
        FirstGroup = firstGroup;
        _secondGroup = secondGroup;
        _events = events;
    }

    /// <summary>Size of the first group.</summary>
    public long FirstGroup { get; }

    /// <summary>The fewest events the first group can have.</summary>
    public long Lowest => Math.Max(0, _events - _secondGroup);

    /// <summary>A most probable number of events in the first group.</summary>
    public long Mode => (long)(((Int128)FirstGroup + 1) * (_events + 1) / ((Int128)FirstGroup + _secondGroup + 2));

    /// <summary>The distribution of the non-events of the first group.</summary>
    public Hypergeometric Mirrored => new(FirstGroup, _secondGroup, FirstGroup + _secondGroup - _events);

    /// <summary>Natural logarithm of the probability of <paramref name="x"/> events in the first group.</summary>
    public double Log(long x) => LogProbability.Hypergeometric(x, FirstGroup, _secondGroup, _events);

    /// <summary>P(x + 1) / P(x) for x and x + 1 inside the support.</summary>
    public double Step(long x) =>
        (double)(FirstGroup - x) / (x + 1) * ((double)(_events - x) / (_secondGroup - _events + x + 1));
}
