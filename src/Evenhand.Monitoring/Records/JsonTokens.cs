using System.Numerics;
using System.Runtime.CompilerServices;
using System.Runtime.InteropServices;
using System.Runtime.Intrinsics;

namespace Evenhand.Monitoring.Records;

/// <summary>Finds where JSON tokens end (RFC 8259), strictly; positions are indices into the line.</summary>
/// <remarks>
/// A general reader decides at every token what it may be and keeps that for a caller who may ask anything; reading a
/// charter's values needs their ends alone. Measured beside Utf8JsonReader by the benchmark <c>decode</c>.
/// </remarks>
internal static class JsonTokens
{
    /// <summary>The answer where the bytes are no such token.</summary>
    public const int Malformed = -1;

    /// <summary>The first position from <paramref name="at"/> that is not white space.</summary>
    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static int SkipSpace(ReadOnlySpan<byte> line, int at)
    {
        unchecked
        {
            while ((uint)at < (uint)line.Length && line[at] <= ' ' && line[at] is (byte)' ' or (byte)'\t' or (byte)'\r' or (byte)'\n')
            {
                at++;
            }

            return at;
        }
    }

    /// <summary>The position of a string's closing quotation mark.</summary>
    /// <param name="line">The line.</param>
    /// <param name="at">The position after the opening one.</param>
    /// <param name="escaped">Set where the string has escapes; otherwise left alone.</param>
    public static int EndOfString(ReadOnlySpan<byte> line, int at, ref bool escaped)
    {
        unchecked
        {
            Vector128<byte> quote = Vector128.Create((byte)'"');
            Vector128<byte> backslash = Vector128.Create((byte)'\\');
            Vector128<byte> lastControl = Vector128.Create((byte)0x1F);
            while (at <= line.Length - Vector128<byte>.Count)
            {
                Vector128<byte> bytes = Vector128.LoadUnsafe(ref MemoryMarshal.GetReference(line), (nuint)at);
                Vector128<byte> special = Vector128.Equals(bytes, quote) | Vector128.Equals(bytes, backslash)
                    | Vector128.Equals(Vector128.Min(bytes, lastControl), bytes);
                uint mask = special.ExtractMostSignificantBits();
                if (mask == 0)
                {
                    at += Vector128<byte>.Count;
                    continue;
                }

                at += BitOperations.TrailingZeroCount(mask);
                if (line[at] == '"')
                {
                    return at;
                }

                at = EndOfEscape(line, at);
                escaped = true;
                if (at < 0)
                {
                    return Malformed;
                }
            }

            return EndOfStringSlowly(line, at, ref escaped);
        }
    }

    /// <summary>The position after a number.</summary>
    public static int EndOfNumber(ReadOnlySpan<byte> line, int at)
    {
        unchecked
        {
            if (at < line.Length && line[at] == '-')
            {
                at++;
            }

            int digits = EndOfDigits(line, at);
            if (digits == at || (line[at] == '0' && digits > at + 1))
            {
                return Malformed;
            }

            at = digits;
            if (at < line.Length && line[at] == '.')
            {
                digits = EndOfDigits(line, at + 1);
                if (digits == at + 1)
                {
                    return Malformed;
                }

                at = digits;
            }

            return at < line.Length && (line[at] | 0x20) == 'e' ? EndOfExponent(line, at + 1) : at;
        }
    }

    /// <summary>The position after <c>true</c>, <c>false</c> or <c>null</c>.</summary>
    public static int EndOfLiteral(ReadOnlySpan<byte> line, int at)
    {
        ReadOnlySpan<byte> rest = line[at..];
        if (rest.StartsWith("true"u8) || rest.StartsWith("null"u8))
        {
            return at + 4;
        }

        return rest.StartsWith("false"u8) ? at + 5 : Malformed;
    }

    private static int EndOfExponent(ReadOnlySpan<byte> line, int at)
    {
        unchecked
        {
            if (at < line.Length && line[at] is (byte)'+' or (byte)'-')
            {
                at++;
            }

            int digits = EndOfDigits(line, at);
            return digits == at ? Malformed : digits;
        }
    }

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    private static int EndOfDigits(ReadOnlySpan<byte> line, int at)
    {
        unchecked
        {
            while ((uint)at < (uint)line.Length && unchecked((uint)(line[at] - '0')) <= 9)
            {
                at++;
            }

            return at;
        }
    }

    private static int EndOfStringSlowly(ReadOnlySpan<byte> line, int at, ref bool escaped)
    {
        unchecked
        {
            while ((uint)at < (uint)line.Length)
            {
                byte b = line[at];
                if (b == '"')
                {
                    return at;
                }

                if (b >= 0x20 && b != '\\')
                {
                    at++;
                    continue;
                }

                at = EndOfEscape(line, at);
                escaped = true;
                if (at < 0)
                {
                    return Malformed;
                }
            }

            return Malformed;
        }
    }

    /// <summary>The position after an escape; a control character, which a string must not hold, is malformed.</summary>
    private static int EndOfEscape(ReadOnlySpan<byte> line, int at)
    {
        unchecked
        {
            if (line[at] != '\\' || at + 1 >= line.Length)
            {
                return Malformed;
            }

            switch (line[at + 1])
            {
                case (byte)'"' or (byte)'\\' or (byte)'/' or (byte)'b' or (byte)'f' or (byte)'n' or (byte)'r' or (byte)'t':
                    return at + 2;
                case (byte)'u' when at + 6 <= line.Length && JsonText.Hex(line.Slice(at + 2, 4)) >= 0:
                    return at + 6;
                default:
                    return Malformed;
            }
        }
    }
}
