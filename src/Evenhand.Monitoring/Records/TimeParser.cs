using System.Globalization;
using Evenhand.Monitoring.Charters;

namespace Evenhand.Monitoring.Records;

/// <summary>
/// Event time from UTF-8 text, in microseconds since 1970-01-01T00:00:00Z (leap seconds not counted), without allocation.
/// </summary>
/// <remarks>
/// <para>Instants lie within the years 0001 to 9999 of the proleptic Gregorian calendar, in UTC. What is finer than a
/// microsecond is cut off towards the past.</para>
/// <para>Dates and times follow RFC 3339, section 5.6, with <c>T</c>, <c>t</c> or a space between them, <c>Z</c>, <c>z</c> or an
/// offset <c>±hh:mm</c>. A leap second <c>:60</c> is accepted where one can be, at 23:59:60 UTC on the last day of a month
/// (section 5.7), and kept as the last microsecond of that minute.</para>
/// </remarks>
public static class TimeParser
{
    /// <summary>0001-01-01T00:00:00Z.</summary>
    public const long Minimum = -62_135_596_800_000_000;

    /// <summary>9999-12-31T23:59:59.999999Z.</summary>
    public const long Maximum = 253_402_300_799_999_999;

    private const long Second = 1_000_000;
    private const long Day = 86_400 * Second;
    private const int DateAndTime = 19;
    private const NumberStyles EpochStyle = NumberStyles.AllowLeadingSign | NumberStyles.AllowDecimalPoint | NumberStyles.AllowExponent;

    /// <summary>Reads a time in a charter's notation.</summary>
    /// <param name="utf8">The text, or the digits of a JSON number.</param>
    /// <param name="unit">The notation.</param>
    /// <param name="microseconds">The instant; 0 where false is returned.</param>
    /// <returns>False where the text is not in the notation or the instant out of range.</returns>
    public static bool TryParse(ReadOnlySpan<byte> utf8, TimeUnit unit, out long microseconds) => unit switch
    {
        TimeUnit.Seconds => TryParseEpoch(utf8, Second, out microseconds),
        TimeUnit.Milliseconds => TryParseEpoch(utf8, 1_000, out microseconds),
        TimeUnit.Microseconds => TryParseEpoch(utf8, 1, out microseconds),
        _ => TryParseRfc3339(utf8, out microseconds),
    };

    /// <summary>Reads a date and time by RFC 3339.</summary>
    /// <param name="utf8">The text, nothing around it.</param>
    /// <param name="microseconds">The instant; 0 where false is returned.</param>
    /// <returns>False where the text is none or the instant out of range.</returns>
    public static bool TryParseRfc3339(ReadOnlySpan<byte> utf8, out long microseconds)
    {
        microseconds = 0;
        if (utf8.Length <= DateAndTime || !HasSeparators(utf8))
        {
            return false;
        }

        int year = Two(utf8, 0) * 100 + Two(utf8, 2);
        int month = Two(utf8, 5);
        int day = Two(utf8, 8);
        int hour = Two(utf8, 11);
        int minute = Two(utf8, 14);
        int second = Two(utf8, 17);
        bool usable = (Two(utf8, 0) | Two(utf8, 2) | month | day | hour | minute | second) >= 0
            && year >= 1 && month is >= 1 and <= 12 && day >= 1 && hour <= 23 && minute <= 59 && second <= 60
            && day <= DateTime.DaysInMonth(year, month);
        if (!usable || !TryParseFraction(utf8[DateAndTime..], out long fraction, out int length)
            || !TryParseOffset(utf8[(DateAndTime + length)..], out int offset))
        {
            return false;
        }

        bool leap = second == 60;
        long seconds = (hour * 3600) + (minute * 60) + (leap ? 59 : second) - (offset * 60L);
        long instant = (DaysFromCivil(year, month, day) * Day) + (seconds * Second);
        instant += leap ? Second - 1 : fraction;
        if (instant is < Minimum or > Maximum || (leap && !EndsMonth(instant)))
        {
            return false;
        }

        microseconds = instant;
        return true;
    }

    private static bool TryParseEpoch(ReadOnlySpan<byte> utf8, long scale, out long microseconds)
    {
        microseconds = 0;
        if (utf8.Length is > 0 and <= 17 && utf8.IndexOfAnyExceptInRange((byte)'0', (byte)'9') < 0)
        {
            return long.TryParse(utf8, NumberStyles.None, CultureInfo.InvariantCulture, out long whole)
                && whole <= Maximum / scale && (microseconds = whole * scale) <= Maximum;
        }

        // The platform's parser takes zero bytes behind a number for padding.
        if (utf8.EndsWith((byte)0) || !decimal.TryParse(utf8, EpochStyle, CultureInfo.InvariantCulture, out decimal value)
            || decimal.Abs(value) > Maximum)
        {
            return false;
        }

        decimal scaled = decimal.Floor(value * scale);
        if (scaled is < Minimum or > Maximum)
        {
            return false;
        }

        microseconds = (long)scaled;
        return true;
    }

    private static bool HasSeparators(ReadOnlySpan<byte> utf8) =>
        utf8[4] == '-' && utf8[7] == '-' && utf8[13] == ':' && utf8[16] == ':'
        && utf8[10] is (byte)'T' or (byte)'t' or (byte)' ';

    /// <summary>Two digits as a number; −1 where they are none.</summary>
    private static int Two(ReadOnlySpan<byte> utf8, int at)
    {
        uint tens = unchecked(utf8[at] - (uint)'0');
        uint ones = unchecked(utf8[at + 1] - (uint)'0');
        return tens <= 9 && ones <= 9 ? (int)((tens * 10) + ones) : -1;
    }

    private static bool TryParseFraction(ReadOnlySpan<byte> utf8, out long microseconds, out int length)
    {
        microseconds = 0;
        length = 0;
        if (utf8[0] != '.')
        {
            return true;
        }

        int digits = utf8[1..].IndexOfAnyExceptInRange((byte)'0', (byte)'9');
        length = digits + 1;
        for (int i = 0; i < 6; i++)
        {
            microseconds = (microseconds * 10) + (i < digits ? utf8[i + 1] - '0' : 0);
        }

        return digits > 0;
    }

    private static bool TryParseOffset(ReadOnlySpan<byte> utf8, out int minutes)
    {
        minutes = 0;
        if (utf8.Length == 1)
        {
            return utf8[0] is (byte)'Z' or (byte)'z';
        }

        if (utf8.Length != 6 || utf8[0] is not ((byte)'+' or (byte)'-') || utf8[3] != ':')
        {
            return false;
        }

        int hour = Two(utf8, 1);
        int minute = Two(utf8, 4);
        minutes = ((hour * 60) + minute) * (utf8[0] == '-' ? -1 : 1);
        return hour is >= 0 and <= 23 && minute is >= 0 and <= 59;
    }

    /// <summary>Whether an instant lies in the last second of a month of UTC.</summary>
    private static bool EndsMonth(long instant)
    {
        if (instant >= Maximum)
        {
            return true;
        }

        DateTime next = DateTime.UnixEpoch.AddTicks((instant + 1) * TimeSpan.TicksPerMicrosecond);
        return next.Day == 1 && next.TimeOfDay == TimeSpan.Zero;
    }

    private static long DaysFromCivil(int year, int month, int day) =>
        new DateTime(year, month, day, 0, 0, 0, DateTimeKind.Utc).Ticks / TimeSpan.TicksPerDay - 719_162;
}
