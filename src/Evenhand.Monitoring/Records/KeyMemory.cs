using System.Buffers.Binary;
using System.Runtime.CompilerServices;

namespace Evenhand.Monitoring.Records;

/// <summary>
/// The members of one object as earlier records wrote them, byte for byte, with the member that followed each last time.
/// </summary>
/// <remarks>
/// Records of a stream are written by one program, so that one key nearly always follows another. What stands between the
/// comma (or the opening brace) before a key and the value behind it is kept whole, white space, quotation marks and colon
/// included: where the same bytes stand again in the same grammatical position, they have been checked before, and one
/// comparison takes the place of reading a key, looking it up and finding the colon. Two followers are kept for each member,
/// so that an optional member does not upset those behind it. Memory is bounded: a full memory starts afresh.
/// </remarks>
internal sealed class KeyMemory
{
    /// <summary>The follower of nothing: where an object starts.</summary>
    public const int Start = 0;

    private const int Unknown = -1;
    private const int MaximumMembers = 256;
    private const int MaximumText = 96;

    // An object whose keys are ever new, such as a map by id, would be learnt for nothing.
    private const int MaximumForgotten = 16;

    private const int WordBytes = 8;

    private Member[] _members = new Member[2];
    private int _count = 1;
    private int _forgotten;

    /// <summary>The member that stands at a position, if it is one of the two that followed before.</summary>
    /// <param name="after">The member before, or <see cref="Start"/>.</param>
    /// <param name="rest">What follows the comma or brace.</param>
    /// <param name="node">The member's node, −1 where it is not read.</param>
    /// <param name="length">Bytes up to the value.</param>
    /// <returns>The member; negative where it is none of the two.</returns>
    public int Match(int after, ReadOnlySpan<byte> rest, out int node, out int length)
    {
        Member[] members = _members;
        ref Member before = ref members[after];
        int first = before.First;
        if (first > 0)
        {
            ref Member member = ref members[first];
            if (member.Stands(rest))
            {
                node = member.Node;
                length = member.Text.Length;
                return first;
            }

            int second = before.Second;
            if (second > 0 && members[second].Stands(rest))
            {
                (before.First, before.Second) = (second, first);
                node = members[second].Node;
                length = members[second].Text.Length;
                return second;
            }
        }

        node = -1;
        length = 0;
        return Unknown;
    }

    /// <summary>Remembers a member and that it followed another.</summary>
    /// <returns>The member, to be given as <c>after</c> next time.</returns>
    public int Learn(int after, ReadOnlySpan<byte> text, int node)
    {
        if (text.Length > MaximumText || _forgotten == MaximumForgotten)
        {
            return Start;
        }

        int member = Find(text);
        if (member == Unknown)
        {
            if (_count == MaximumMembers)
            {
                Forget();
                after = Start;
            }

            member = Add(text, node);
        }

        ref Member before = ref _members[after];
        if (before.First != member)
        {
            (before.First, before.Second) = (member, before.First);
        }

        return member;
    }

    private int Find(ReadOnlySpan<byte> text)
    {
        for (int i = 1; i < _count; i++)
        {
            if (text.SequenceEqual(_members[i].Text))
            {
                return i;
            }
        }

        return Unknown;
    }

    private int Add(ReadOnlySpan<byte> text, int node)
    {
        if (_count == _members.Length)
        {
            Array.Resize(ref _members, Math.Min(MaximumMembers, _members.Length * 2));
        }

        _members[_count] = new Member(text.ToArray(), node);
        return _count++;
    }

    private void Forget()
    {
        _forgotten++;
        _count = 1;
        _members[Start] = default;
    }

    /// <summary>A member's text, whose first sixteen bytes are also kept as two words: most keys are compared without a loop or a call.</summary>
    private struct Member(byte[] text, int node)
    {
        private readonly ulong _low = Packed.Prefix(text);
        private readonly ulong _lowMask = Mask(text.Length);
        private readonly ulong _high = text.Length > WordBytes ? Packed.Prefix(text.AsSpan(WordBytes)) : 0;
        private readonly ulong _highMask = text.Length > WordBytes ? Mask(text.Length - WordBytes) : 0;

        public readonly byte[] Text = text;

        public readonly int Node = node;

        public int First;

        public int Second;

        [MethodImpl(MethodImplOptions.AggressiveInlining)]
        public readonly bool Stands(ReadOnlySpan<byte> rest)
        {
            if (rest.Length < 2 * WordBytes)
            {
                return rest.StartsWith(Text);
            }

            ulong difference = ((BinaryPrimitives.ReadUInt64LittleEndian(rest) ^ _low) & _lowMask)
                | ((BinaryPrimitives.ReadUInt64LittleEndian(rest[WordBytes..]) ^ _high) & _highMask);
            return difference == 0 && (Text.Length <= 2 * WordBytes || rest.StartsWith(Text));
        }

        private static ulong Mask(int length) => length >= WordBytes ? ulong.MaxValue : (1UL << (length * 8)) - 1;
    }
}
