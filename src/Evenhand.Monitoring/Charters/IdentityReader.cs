using Evenhand.Monitoring.Charters.Yaml;
using NodaTime;

namespace Evenhand.Monitoring.Charters;

/// <summary>Reads what the charter is called and whose it is.</summary>
internal static class IdentityReader
{
    /// <summary>The charter's id, or an empty text.</summary>
    public static string Id(MapReader root)
    {
        const string Mend = "write letters a-z, digits and hyphens, such as flood-grants";
        KeyedNode? node = root.Require("charter", "name the stream, such as charter: flood-grants");
        string? id = TextValue.Read(node, Mend);
        if (id is not null && !id.All(c => char.IsAsciiLetterLower(c) || char.IsAsciiDigit(c) || c == '-'))
        {
            node!.Report($"{QuotedText.Of(id)} is no id", Mend);
        }

        return id ?? "";
    }

    /// <summary>The name of a time zone, or the default.</summary>
    public static string TimeZone(MapReader root)
    {
        const string Mend = "write a name of the tz database such as Europe/Lisbon";
        KeyedNode? node = root.Find("time_zone");
        string? zone = TextValue.Read(node, Mend);
        if (zone is null)
        {
            return "Etc/UTC";
        }

        if (DateTimeZoneProviders.Tzdb.GetZoneOrNull(zone) is null || !DateTimeZoneProviders.Tzdb.Ids.Contains(zone))
        {
            node!.Report(
                $"{QuotedText.Of(zone)} is no time zone of the tz database",
                NearestName.Suggest(zone, DateTimeZoneProviders.Tzdb.Ids, Mend));
        }

        return zone;
    }
}
