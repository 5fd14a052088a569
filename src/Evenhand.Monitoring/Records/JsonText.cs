using System.Text;

namespace Evenhand.Monitoring.Records;

/// <summary>Resolves the escapes of JSON strings (RFC 8259, section 7).</summary>
internal static class JsonText
{
    /// <summary>The answer for a string with an escaped surrogate that lacks its partner.</summary>
    public const int LoneSurrogate = -1;

    /// <summary>Writes a string's value.</summary>
    /// <param name="escaped">Valid content of a JSON string.</param>
    /// <param name="text">At least as long.</param>
    /// <returns>Bytes written, or <see cref="LoneSurrogate"/>.</returns>
    public static int Unescape(ReadOnlySpan<byte> escaped, Span<byte> text)
    {
        int length = 0;
        while (!escaped.IsEmpty)
        {
            int plain = escaped.IndexOf((byte)'\\');
            plain = plain < 0 ? escaped.Length : plain;
            escaped[..plain].CopyTo(text[length..]);
            length += plain;
            escaped = escaped[plain..];
            if (escaped.IsEmpty)
            {
                break;
            }

            int taken = 2;
            if (escaped[1] != 'u')
            {
                text[length++] = Short(escaped[1]);
            }
            else if (TryRune(escaped, out Rune rune, out taken))
            {
                length += rune.EncodeToUtf8(text[length..]);
            }
            else
            {
                return LoneSurrogate;
            }

            escaped = escaped[taken..];
        }

        return length;
    }

    /// <summary>Four hexadecimal digits as a number; −1 where they are none.</summary>
    public static int Hex(ReadOnlySpan<byte> digits)
    {
        int value = 0;
        foreach (byte digit in digits)
        {
            int nibble = HexDigit(digit);
            if (nibble < 0)
            {
                return -1;
            }

            value = (value << 4) | nibble;
        }

        return value;
    }

    private static int HexDigit(byte digit) => digit switch
    {
        >= (byte)'0' and <= (byte)'9' => digit - '0',
        >= (byte)'a' and <= (byte)'f' => digit - 'a' + 10,
        >= (byte)'A' and <= (byte)'F' => digit - 'A' + 10,
        _ => -1,
    };

    private static byte Short(byte letter) => letter switch
    {
        (byte)'b' => (byte)'\b',
        (byte)'f' => (byte)'\f',
        (byte)'n' => (byte)'\n',
        (byte)'r' => (byte)'\r',
        (byte)'t' => (byte)'\t',
        _ => letter,
    };

    private static bool TryRune(ReadOnlySpan<byte> escaped, out Rune rune, out int taken)
    {
        char unit = (char)Hex(escaped.Slice(2, 4));
        taken = 6;
        if (Rune.TryCreate(unit, out rune))
        {
            return true;
        }

        taken = 12;
        return escaped.Length >= 12 && escaped[6] == '\\' && escaped[7] == 'u'
            && Rune.TryCreate(unit, (char)Hex(escaped.Slice(8, 4)), out rune);
    }
}
