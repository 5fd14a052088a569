using System.Globalization;

namespace Evenhand.Monitoring.Records;

/// <summary>Numbers from UTF-8 text: digits with a sign, a point and an exponent; nothing else around them.</summary>
internal static class NumberParser
{
    private const NumberStyles Style = NumberStyles.AllowLeadingSign | NumberStyles.AllowDecimalPoint | NumberStyles.AllowExponent;
    private const int ExactDigits = 15;

    private static ReadOnlySpan<double> PowersOfTen =>
        [1e0, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11, 1e12, 1e13, 1e14, 1e15];

    /// <summary>The nearest double of a text, rounding to even.</summary>
    /// <returns>False for anything that is no finite number.</returns>
    public static bool TryParse(ReadOnlySpan<byte> text, out double value)
    {
        if (text.Length is > 0 and <= 8 && TryParseDigits(Packed.Prefix(text), text.Length, out uint whole))
        {
            value = whole;
            return true;
        }

        // Up to fifteen digits are an integer below 2⁵³, and powers of ten up to 10²² are exact, so that one division
        // rounds once and correctly (W. D. Clinger, "How to read floating point numbers accurately", PLDI 1990).
        int at = text.Length > 0 && text[0] == '-' ? 1 : 0;
        long digits = 0;
        int point = -1;
        int count = 0;
        for (int i = at; i < text.Length; i++)
        {
            uint digit = unchecked(text[i] - (uint)'0');
            if (digit <= 9 && count < ExactDigits)
            {
                digits = (digits * 10) + digit;
                count++;
            }
            else if (text[i] == '.' && point < 0)
            {
                point = count;
            }
            else
            {
                return TryParseSlowly(text, out value);
            }
        }

        if (count == 0)
        {
            return TryParseSlowly(text, out value);
        }

        double magnitude = point < 0 ? digits : digits / PowersOfTen[count - point];
        value = at == 1 ? -magnitude : magnitude;
        return true;
    }

    /// <summary>Up to eight digits at once, as the bytes of one word, without a loop whose length the processor would have to guess.</summary>
    /// <remarks>Pairs of digits, then of pairs, then of fours are added up by multiplication (D. Lemire, "Quickly parsing eight digits", 2018).</remarks>
    private static bool TryParseDigits(ulong word, int length, out uint value)
    {
        unchecked
        {
            // The last digit stands in the highest byte; zeros are put before the first.
            int free = (8 - length) * 8;
            word = (word << free) | (0x3030303030303030UL & ((1UL << free) - 1));
            value = 0;
            if (((word & 0xF0F0F0F0F0F0F0F0) | (((word + 0x0606060606060606) & 0xF0F0F0F0F0F0F0F0) >> 4)) != 0x3333333333333333)
            {
                return false;
            }

            word -= 0x3030303030303030;
            word = (word * 10) + (word >> 8);
            value = (uint)((((word & 0x000000FF000000FF) * 0x000F424000000064) + (((word >> 16) & 0x000000FF000000FF) * 0x0000271000000001)) >> 32);
            return true;
        }
    }

    private static bool TryParseSlowly(ReadOnlySpan<byte> text, out double value)
    {
        // The platform's parser takes zero bytes behind a number for padding.
        value = 0;
        return !text.EndsWith((byte)0) && double.TryParse(text, Style, CultureInfo.InvariantCulture, out value) && double.IsFinite(value);
    }
}
