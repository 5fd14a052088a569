using CsCheck;
using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Windows;
using Xunit;

namespace Evenhand.Monitoring.Tests.Windows;

/// <summary>Windows put together from buckets against a plain count of the records between the stated bounds.</summary>
public sealed class WindowSpanTests
{
    [Theory]
    [InlineData("Etc/UTC")]
    [InlineData("Europe/Berlin")]
    [InlineData("Asia/Kathmandu")]
    [InlineData("America/St_Johns")]
    [InlineData("Africa/Cairo")]
    public void Window_AnyAsOfAndZone_HoldsExactlyTheRecordsBetweenItsBounds(string zone)
    {
        Charter charter = SampleStream.Charter(zone);
        List<SampleRecord> records = SampleStream.Random(5, 3000, 13 * EventTime.Day);
        SumLayout layout = new(charter);
        LocalDays days = new(zone);
        Gen.Long[SampleStream.Start + (11 * EventTime.Day), SampleStream.Start + (13 * EventTime.Day)].Sample(
            asOf =>
            {
                Shard shard = SampleStream.NewShard(charter, new ShardOptions { AsOf = asOf });
                SampleStream.Feed(shard, charter, records);
                foreach (CharterDuration window in charter.Windows)
                {
                    WindowSpan span = WindowSpan.Ending(window, asOf, days);
                    long[] values = new long[layout.Length];
                    shard.AddWindow(span, 0, values);
                    CellCounts counts = new WindowSums(layout, window.Text, null, values).Counts(layout.Groupings[0], 0);

                    Assert.True(span.To == asOf && span.From <= asOf - window.Microseconds + EventTime.Hour);
                    Assert.Equal(records.Count(r => r.Time >= span.From && r.Time < span.To), counts.Decided + counts.Other);
                }
            },
            iter: 12);
    }

    [Fact]
    public void Start_ByLength_FallsOnMinuteQuarterHourOrLocalDay()
    {
        LocalDays berlin = new("Europe/Berlin");
        long asOf = Parse("2031-04-02T10:20:30Z");

        Assert.Equal("2031-04-02T04:20:00Z", Start("6h"));
        Assert.Equal("2031-04-02T04:15:00Z", Start("361m"));
        Assert.Equal("2031-03-26T10:15:00Z", Start("7d"));
        // Clocks went forward on 30 March: local midnight of 25 March is 23:00 the day before in UTC.
        Assert.Equal("2031-03-24T23:00:00Z", Start("8d"));

        string Start(string text)
        {
            int number = int.Parse(text[..^1], System.Globalization.CultureInfo.InvariantCulture);
            TimeSpan length = text[^1] switch { 'h' => TimeSpan.FromHours(number), 'm' => TimeSpan.FromMinutes(number), _ => TimeSpan.FromDays(number) };
            return EventTime.Text(WindowSpan.Ending(new CharterDuration(text, length), asOf, berlin).From);
        }
    }

    [Fact]
    public void Baseline_BeforeAWindow_EndsWhereTheWindowStarts()
    {
        Charter charter = SampleStream.Charter();
        SumLayout layout = new(charter);
        LocalDays days = new("Etc/UTC");
        List<SampleRecord> records = SampleStream.Random(6, 3000, 13 * EventTime.Day);
        Shard shard = SampleStream.NewShard(charter);
        SampleStream.Feed(shard, charter, records);
        long asOf = EventTime.Floor(records.Max(r => r.Time), EventTime.Minute) + EventTime.Minute;
        WindowSpan before = WindowSpan.Before(WindowSpan.Ending(charter.Windows[0], asOf, days), SampleStream.Duration("5d", 5), days);
        long[] values = new long[layout.Length];

        shard.AddWindow(before, 0, values);

        CellCounts counts = new WindowSums(layout, "baseline", null, values).Counts(layout.Groupings[0], 0);
        Assert.Equal(asOf - EventTime.Hour, before.To);
        Assert.Equal(records.Count(r => r.Time >= before.From && r.Time < before.To), counts.Decided + counts.Other);
    }

    private static long Parse(string text) =>
        (DateTimeOffset.Parse(text, System.Globalization.CultureInfo.InvariantCulture).UtcTicks - DateTime.UnixEpoch.Ticks) / TimeSpan.TicksPerMicrosecond;
}
