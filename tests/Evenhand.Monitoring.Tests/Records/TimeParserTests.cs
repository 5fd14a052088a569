using System.Globalization;
using System.Text;
using CsCheck;
using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Records;
using Xunit;

namespace Evenhand.Monitoring.Tests.Records;

public sealed class TimeParserTests
{
    // So that local times of any offset stay within the years that the platform can write.
    private const long EdgeDay = 86_400_000_000;

    // Expected instants: the first five are the examples of RFC 3339, section 5.8 (the instants by hand from the text
    // there, which says what each is in UTC); the others by common practice, no source, through System.DateTimeOffset.
    [Theory]
    [InlineData("1985-04-12T23:20:50.52Z", "1985-04-12T23:20:50.5200000")]
    [InlineData("1996-12-19T16:39:57-08:00", "1996-12-20T00:39:57.0000000")]
    [InlineData("1990-12-31T23:59:60Z", "1990-12-31T23:59:59.9999990")]
    [InlineData("1990-12-31T15:59:60-08:00", "1990-12-31T23:59:59.9999990")]
    [InlineData("1937-01-01T12:00:27.87+00:20", "1937-01-01T11:40:27.8700000")]
    [InlineData("2017-01-01T05:44:60+05:45", "2016-12-31T23:59:59.9999990")]
    [InlineData("2016-12-31T23:59:60.5Z", "2016-12-31T23:59:59.9999990")]
    [InlineData("2031-03-01t05:45:00.1z", "2031-03-01T05:45:00.1000000")]
    [InlineData("2031-03-01 05:45:00Z", "2031-03-01T05:45:00.0000000")]
    [InlineData("2031-03-01T05:45:00+05:45", "2031-03-01T00:00:00.0000000")]
    [InlineData("2031-03-01T00:00:00-00:00", "2031-03-01T00:00:00.0000000")]
    [InlineData("2031-03-01T00:00:00+23:59", "2031-02-28T00:01:00.0000000")]
    [InlineData("2031-03-01T00:00:00-12:01", "2031-03-01T12:01:00.0000000")]
    [InlineData("2031-03-01T00:00:00.1234569Z", "2031-03-01T00:00:00.1234560")]
    [InlineData("1969-12-31T23:59:59.9999999999999Z", "1969-12-31T23:59:59.9999990")]
    [InlineData("2032-02-29T00:00:00Z", "2032-02-29T00:00:00.0000000")]
    [InlineData("2000-02-29T00:00:00Z", "2000-02-29T00:00:00.0000000")]
    [InlineData("0001-01-01T00:00:00Z", "0001-01-01T00:00:00.0000000")]
    [InlineData("9999-12-31T23:59:59.999999Z", "9999-12-31T23:59:59.9999990")]
    [InlineData("9999-12-31T23:59:60Z", "9999-12-31T23:59:59.9999990")]
    public void TryParseRfc3339_DateAndTime_GivesTheInstant(string text, string utc)
    {
        DateTime expected = DateTime.ParseExact(utc, "yyyy-MM-dd'T'HH:mm:ss.fffffff", CultureInfo.InvariantCulture);
        Assert.True(TimeParser.TryParseRfc3339(Encoding.UTF8.GetBytes(text), out long microseconds));
        Assert.Equal((expected - DateTime.UnixEpoch).Ticks / TimeSpan.TicksPerMicrosecond, microseconds);
    }

    [Theory]
    [InlineData("")]
    [InlineData("2031-03-01")]
    [InlineData("2031-03-01T00:00:00")]
    [InlineData("2031-03-01T00:00Z")]
    [InlineData("2031-03-01T24:00:00Z")]
    [InlineData("2031-03-01T00:60:00Z")]
    [InlineData("2031-03-01T00:00:61Z")]
    [InlineData("2031-03-01T00:00:60Z")]
    [InlineData("2031-03-31T22:59:60Z")]
    [InlineData("2016-12-31T23:59:60+01:00")]
    [InlineData("2031-02-29T00:00:00Z")]
    [InlineData("1900-02-29T00:00:00Z")]
    [InlineData("2031-04-31T00:00:00Z")]
    [InlineData("2031-00-01T00:00:00Z")]
    [InlineData("2031-13-01T00:00:00Z")]
    [InlineData("2031-01-00T00:00:00Z")]
    [InlineData("0000-01-01T00:00:00Z")]
    [InlineData("0001-01-01T00:00:00+00:01")]
    [InlineData("9999-12-31T23:59:59-00:01")]
    [InlineData("2031-03-01T00:00:00+24:00")]
    [InlineData("2031-03-01T00:00:00+00:60")]
    [InlineData("2031-03-01T00:00:00+0545")]
    [InlineData("2031-03-01T00:00:00+05")]
    [InlineData("2031-03-01T00:00:00.Z")]
    [InlineData("2031-03-01T00:00:00.123")]
    [InlineData("2031-03-01T00:00:00,1Z")]
    [InlineData("2031-03-01T00:00:00ZZ")]
    [InlineData("2031-03-01T00:00:00Z ")]
    [InlineData(" 2031-03-01T00:00:00Z")]
    [InlineData("2031-3-01T00:00:00.0Z")]
    [InlineData("+2031-03-01T00:00:00Z")]
    [InlineData("2031-03-01T0a:00:00Z")]
    [InlineData("２０31-03-01T00:00:00Z")]
    public void TryParseRfc3339_AnythingElse_IsRefused(string text)
    {
        Assert.False(TimeParser.TryParseRfc3339(Encoding.UTF8.GetBytes(text), out long microseconds));
        Assert.Equal(0, microseconds);
    }

    [Fact]
    public void TryParseRfc3339_EveryMonthsEnd_TakesItsLastDayAndNoMore()
    {
        // Common practice, no source: the lengths of months in the proleptic Gregorian calendar, by hand.
        int[] common = [31, 28, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31];
        foreach (int year in (int[])[1900, 2000, 2031, 2032, 2100])
        {
            for (int month = 1; month <= 12; month++)
            {
                int days = common[month - 1] + (month == 2 && year is 2000 or 2032 ? 1 : 0);
                Assert.True(Takes($"{year}-{month:00}-{(month == 2 && year is 2000 or 2032 ? 29 : days):00}T00:00:00Z"));
                Assert.False(Takes($"{year}-{month:00}-{(month == 2 && year is 2000 or 2032 ? 30 : days + 1):00}T00:00:00Z"));
            }
        }
    }

    [Theory]
    [InlineData("0", TimeUnit.Seconds, 0)]
    [InlineData("1932595200", TimeUnit.Seconds, 1_932_595_200_000_000)]
    [InlineData("1932595200.25", TimeUnit.Seconds, 1_932_595_200_250_000)]
    [InlineData("1.9325952e9", TimeUnit.Seconds, 1_932_595_200_000_000)]
    [InlineData("-1.5", TimeUnit.Seconds, -1_500_000)]
    [InlineData("-0.0000001", TimeUnit.Seconds, -1)]
    [InlineData("1932595200123", TimeUnit.Milliseconds, 1_932_595_200_123_000)]
    [InlineData("1932595200123.4567", TimeUnit.Milliseconds, 1_932_595_200_123_456)]
    [InlineData("1932595200123456", TimeUnit.Microseconds, 1_932_595_200_123_456)]
    [InlineData("253402300799", TimeUnit.Seconds, 253_402_300_799_000_000)]
    [InlineData("253402300799.999999", TimeUnit.Seconds, TimeParser.Maximum)]
    [InlineData("253402300799999999", TimeUnit.Microseconds, TimeParser.Maximum)]
    [InlineData("-62135596800", TimeUnit.Seconds, TimeParser.Minimum)]
    [InlineData("-62135596800000000", TimeUnit.Microseconds, TimeParser.Minimum)]
    public void TryParse_Epoch_GivesTheInstant(string text, TimeUnit unit, long expected)
    {
        Assert.True(TimeParser.TryParse(Encoding.UTF8.GetBytes(text), unit, out long microseconds));
        Assert.Equal(expected, microseconds);
    }

    [Theory]
    [InlineData("", TimeUnit.Seconds)]
    [InlineData("NaN", TimeUnit.Seconds)]
    [InlineData("Infinity", TimeUnit.Seconds)]
    [InlineData("true", TimeUnit.Milliseconds)]
    [InlineData("1e400", TimeUnit.Seconds)]
    [InlineData("1e99999999999", TimeUnit.Seconds)]
    [InlineData("79228162514264337593543950335", TimeUnit.Seconds)]
    [InlineData("99999999999999999999999999999999999", TimeUnit.Microseconds)]
    [InlineData("253402300800", TimeUnit.Seconds)]
    [InlineData("99999999999999999", TimeUnit.Milliseconds)]
    [InlineData("253402300800000000", TimeUnit.Microseconds)]
    [InlineData("-62135596800.000001", TimeUnit.Seconds)]
    [InlineData("1 932", TimeUnit.Seconds)]
    [InlineData("1,932", TimeUnit.Seconds)]
    [InlineData(" 1932", TimeUnit.Seconds)]
    [InlineData("0x10", TimeUnit.Seconds)]
    [InlineData("1932595200.5\0", TimeUnit.Seconds)]
    [InlineData("1932595200\0", TimeUnit.Seconds)]
    [InlineData("2031-03-01T00:00:00Z", TimeUnit.Seconds)]
    [InlineData("1932595200", TimeUnit.Rfc3339)]
    public void TryParse_NoSuchTime_IsRefused(string text, TimeUnit unit)
    {
        Assert.False(TimeParser.TryParse(Encoding.UTF8.GetBytes(text), unit, out long microseconds));
        Assert.Equal(0, microseconds);
    }

    /// <summary>Against the platform's own formatting of instants with offsets.</summary>
    [Fact]
    public void TryParseRfc3339_WhatThePlatformWrites_IsReadBack() =>
        Gen.Select(Gen.Long[TimeParser.Minimum + EdgeDay, TimeParser.Maximum - EdgeDay], Gen.Int[-839, 839]).Sample((microseconds, minutes) =>
        {
            DateTimeOffset moment = new DateTimeOffset(DateTime.UnixEpoch.AddTicks(microseconds * 10)).ToOffset(TimeSpan.FromMinutes(minutes));
            string text = moment.ToString("yyyy-MM-dd'T'HH:mm:ss.ffffffzzz", CultureInfo.InvariantCulture);
            Assert.True(TimeParser.TryParseRfc3339(Encoding.UTF8.GetBytes(text), out long read), text);
            Assert.Equal(microseconds, read);
        });

    [Fact]
    public void TryParse_AnyBytes_NeverThrows() =>
        Gen.Select(Gen.Byte.Array[0, 40], Gen.Int[0, 2].Select(i => ((string[])["2031-03-01T00:00:00Z", "1932595200.5", "-1e3"])[i]), Gen.Int[0, 3]).Sample((bytes, start, unit) =>
        {
            byte[] text = [.. Encoding.UTF8.GetBytes(start).Take(bytes.Length), .. bytes];
            TimeParser.TryParse(text, (TimeUnit)unit, out long a);
            TimeParser.TryParse(bytes, (TimeUnit)unit, out long b);
            Assert.InRange(a, TimeParser.Minimum, TimeParser.Maximum);
            Assert.InRange(b, TimeParser.Minimum, TimeParser.Maximum);
        });

    private static bool Takes(string text) => TimeParser.TryParseRfc3339(Encoding.UTF8.GetBytes(text), out _);
}
