using System.Buffers.Text;
using System.Globalization;

namespace Evenhand.Monitoring.Snapshots;

/// <summary>
/// A double as ECMAScript's Number::toString writes it (ECMA-262, section 6.1.6.1.20, which RFC 8785,
/// section 3.2.2.3, takes over): the fewest digits that read back as the same double, the nearest of
/// those, plain from 1e-6 up to below 1e21, with an exponent elsewhere.
/// </summary>
internal static class CanonicalNumber
{
    /// <summary>Room that any double fits in: a sign, 17 digits, a point, <c>e-324</c>, or 21 plain digits.</summary>
    public const int MaxLength = 32;

    /// <summary>Writes a finite number.</summary>
    /// <returns>The count of bytes written.</returns>
    public static int Format(double value, Span<byte> to)
    {
        if (Math.Abs(value) < CanonicalJson.MaxSafeInteger && value == Math.Truncate(value))
        {
            Utf8Formatter.TryFormat((long)value, to, out var written);
            return written;
        }

        Span<byte> digits = stackalloc byte[MaxLength];
        var length = Shortest(value, digits);
        var sign = 0;
        if (value < 0)
        {
            to[sign++] = (byte)'-';
        }

        return sign + Lay(digits[..length], to[sign..]);
    }

    // The runtime's own shortest form, "d.dddE+ddd" or plain: its digits are ECMAScript's, its layout is not.
    private static int Shortest(double value, Span<byte> to)
    {
        var magnitude = Math.Abs(value);
        magnitude.TryFormat(to, out var length, "R", CultureInfo.InvariantCulture);

        // At a few powers of two (2^-958 is one) the runtime's shortest form reads back as the double below. Seventeen digits never do.
        if (double.Parse(to[..length], CultureInfo.InvariantCulture) != magnitude)
        {
            magnitude.TryFormat(to, out length, "E16", CultureInfo.InvariantCulture);
        }

        return length;
    }

    private static int Lay(ReadOnlySpan<byte> shortest, Span<byte> to)
    {
        Span<byte> digits = stackalloc byte[MaxLength];
        var (count, point) = Split(shortest, digits);
        digits = digits[..count];
        return point switch
        {
            > 0 and <= 21 when count <= point => Whole(digits, point, to),
            > 0 and <= 21 => Pointed(digits, point, to),
            > -6 and <= 0 => Fraction(digits, point, to),
            _ => Exponent(digits, point - 1, to),
        };
    }

    // The value is 0.DIGITS times ten to the power of the second result.
    private static (int Count, int Point) Split(ReadOnlySpan<byte> shortest, Span<byte> digits)
    {
        int count = 0, point = 0, exponent = 0;
        var seenPoint = false;
        for (var i = 0; i < shortest.Length; i++)
        {
            var c = shortest[i];
            if (c == 'E')
            {
                // "E+23" or "E-07": the parser takes the sign.
                _ = Utf8Parser.TryParse(shortest[(i + 1)..], out exponent, out _);
                break;
            }

            if (c == '.')
            {
                seenPoint = true;
                continue;
            }

            point += seenPoint ? 0 : 1;
            if (count == 0 && c == '0')
            {
                point--;
                continue;
            }

            digits[count++] = c;
        }

        while (digits[count - 1] == '0')
        {
            count--;
        }

        return (count, point + exponent);
    }

    private static int Whole(ReadOnlySpan<byte> digits, int point, Span<byte> to)
    {
        digits.CopyTo(to);
        to[digits.Length..point].Fill((byte)'0');
        return point;
    }

    private static int Pointed(ReadOnlySpan<byte> digits, int point, Span<byte> to)
    {
        digits[..point].CopyTo(to);
        to[point] = (byte)'.';
        digits[point..].CopyTo(to[(point + 1)..]);
        return digits.Length + 1;
    }

    private static int Fraction(ReadOnlySpan<byte> digits, int point, Span<byte> to)
    {
        "0.000000"u8[..(2 - point)].CopyTo(to);
        digits.CopyTo(to[(2 - point)..]);
        return 2 - point + digits.Length;
    }

    private static int Exponent(ReadOnlySpan<byte> digits, int exponent, Span<byte> to)
    {
        var length = digits.Length == 1 ? Whole(digits, 1, to) : Pointed(digits, 1, to);
        to[length++] = (byte)'e';
        to[length++] = exponent < 0 ? (byte)'-' : (byte)'+';
        Utf8Formatter.TryFormat(Math.Abs(exponent), to[length..], out var written);
        return length + written;
    }
}
