using Evenhand.Monitoring.Charters.Yaml;
using NodaTime;
using NodaTime.Text;

namespace Evenhand.Monitoring.Charters;

/// <summary>Reads fixed instants by RFC 3339.</summary>
internal static class InstantValue
{
    private const string Mend = "write an instant such as 2031-04-01T00:00:00Z";

    /// <summary>Microseconds since 1970-01-01T00:00:00Z, what is finer cut off; null if unreadable.</summary>
    public static long? Read(KeyedNode? node)
    {
        string? text = node?.Text(Mend);
        if (text is null)
        {
            return null;
        }

        ParseResult<OffsetDateTime> parsed = OffsetDateTimePattern.Rfc3339.Parse(text);
        if (!parsed.Success)
        {
            node!.Report($"{QuotedText.Of(text)} is no instant by RFC 3339", Mend);
            return null;
        }

        return parsed.Value.ToInstant().ToUnixTimeTicks() / TimeSpan.TicksPerMicrosecond;
    }
}
