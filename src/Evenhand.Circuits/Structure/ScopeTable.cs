using System.Numerics;
using System.Runtime.InteropServices;

namespace Evenhand.Circuits.Structure;

/// <summary>Sets of variables, each kept once and named by a number: nodes of a circuit have few different ones.</summary>
internal sealed class ScopeTable
{
    private readonly int _words;
    private readonly List<ulong> _bits = [];
    private readonly Dictionary<ulong, List<int>> _byHash = [];
    private readonly ulong[] _union;

    public ScopeTable(int variables)
    {
        _words = Math.Max(1, (variables + 63) / 64);
        _union = new ulong[_words];
    }

    /// <summary>The set of one variable.</summary>
    public int Of(int variable)
    {
        Array.Clear(_union);
        _union[variable / 64] = 1UL << (variable % 64);
        return Intern();
    }

    /// <summary>The union of some sets that share nothing, or −1 where two of them do.</summary>
    /// <param name="sets">At least one.</param>
    /// <param name="shared">The first variable that two of them share.</param>
    public int DisjointUnion(ReadOnlySpan<int> sets, out int shared)
    {
        shared = -1;
        if (sets.Length == 1)
        {
            return sets[0];
        }

        Array.Clear(_union);
        foreach (int set in sets)
        {
            ReadOnlySpan<ulong> bits = BitsOf(set);
            for (int w = 0; w < _words; w++)
            {
                ulong both = _union[w] & bits[w];
                if (both != 0)
                {
                    shared = (w * 64) + BitOperations.TrailingZeroCount(both);
                    return -1;
                }

                _union[w] |= bits[w];
            }
        }

        return Intern();
    }

    /// <summary>Whether a variable is in a set.</summary>
    public bool Contains(int set, int variable) => (BitsOf(set)[variable / 64] >> (variable % 64) & 1) == 1;

    /// <summary>A variable that is in one of two different sets only.</summary>
    public int Difference(int a, int b)
    {
        ReadOnlySpan<ulong> x = BitsOf(a), y = BitsOf(b);
        int word = 0;
        while (x[word] == y[word])
        {
            word++;
        }

        return (word * 64) + BitOperations.TrailingZeroCount(x[word] ^ y[word]);
    }

    /// <summary>The bits of a set, 64 variables a word.</summary>
    public ReadOnlySpan<ulong> BitsOf(int set) => CollectionsMarshal.AsSpan(_bits).Slice(set * _words, _words);

    private int Intern()
    {
        ulong hash = 0;
        unchecked
        {
            foreach (ulong word in _union)
            {
                hash = (BitOperations.RotateLeft(hash, 23) ^ word) * 0x9E3779B97F4A7C15;
            }
        }

        ref List<int>? same = ref CollectionsMarshal.GetValueRefOrAddDefault(_byHash, hash, out _);
        same ??= [];
        foreach (int set in same)
        {
            if (BitsOf(set).SequenceEqual(_union))
            {
                return set;
            }
        }

        int added = _bits.Count / _words;
        _bits.AddRange(_union);
        same.Add(added);
        return added;
    }
}
