using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Windows;
using Xunit;

namespace Evenhand.Monitoring.Tests.Windows;

/// <summary>Days that the tz database knows to be odd.</summary>
public sealed class LocalDaysTests
{
    /// <summary>Samoa left out 30 December 2011 to cross the date line (tz database, zone Pacific/Apia): the 29th is followed by the 31st.</summary>
    [Fact]
    public void DayOf_BesideADayThatWasLeftOut_GoesOnWithTheNext()
    {
        LocalDays days = new("Pacific/Apia");
        (long start, long end) = days.DayOf(At("2011-12-29T23:00:00-10:00"));

        Assert.Equal(At("2011-12-29T00:00:00-10:00"), start);
        Assert.Equal(At("2011-12-31T00:00:00+14:00"), end);
        Assert.Equal((At("2011-12-31T00:00:00+14:00"), At("2012-01-01T00:00:00+14:00")), days.DayOf(end));
    }

    [Fact]
    public void Ending_AWindowThatStartsOnADayLeftOut_StartsWithTheNext()
    {
        WindowSpan span = WindowSpan.Ending(new CharterDuration("10d", TimeSpan.FromDays(10)), At("2012-01-09T12:00:00+14:00"), new LocalDays("Pacific/Apia"));

        Assert.Equal(At("2011-12-31T00:00:00+14:00"), span.From);
    }

    /// <summary>The years that windows may reach from the first and last usable instants.</summary>
    [Theory]
    [InlineData("1000-01-01T00:00:00+00:00")]
    [InlineData("8999-12-31T23:59:59+00:00")]
    public void Ending_AtTheEndsOfTheUsableYears_IsDefined(string at)
    {
        WindowSpan span = WindowSpan.Ending(new CharterDuration("100y", TimeSpan.FromDays(36525)), At(at), new LocalDays("Pacific/Apia"));

        Assert.True(span.From < span.To);
    }

    private static long At(string time) => (DateTimeOffset.Parse(time, System.Globalization.CultureInfo.InvariantCulture) - DateTimeOffset.UnixEpoch).Ticks / 10;
}
