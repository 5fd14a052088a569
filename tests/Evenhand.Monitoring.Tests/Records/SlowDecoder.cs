using System.Globalization;
using System.Text;
using System.Text.Json;
using System.Text.RegularExpressions;
using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Records;

namespace Evenhand.Monitoring.Tests.Records;

/// <summary>Decodes a line by the rules as they are written down, on the platform's document model, with no eye to speed.</summary>
internal static partial class SlowDecoder
{
    private static readonly UTF8Encoding Strict = new(encoderShouldEmitUTF8Identifier: false, throwOnInvalidBytes: true);

    public static DecodedRecord Decode(byte[] line, Charter charter, RecordLayout layout, IdHasher hasher)
    {
        RejectReason reason = Syntax(line);
        if (reason != RejectReason.None)
        {
            return DecodedRecord.Rejected(reason);
        }

        using JsonDocument document = JsonDocument.Parse(line, new JsonDocumentOptions { MaxDepth = 64 });
        if (document.RootElement.ValueKind != JsonValueKind.Object)
        {
            return DecodedRecord.Rejected(RejectReason.NotAnObject);
        }

        List<FieldPath?> paths = [charter.RecordId, charter.Revision, charter.Time!.At, charter.Decision!.At, charter.Score!.At, charter.Outcome!.At];
        paths.AddRange(layout.Fields.Select(f => f.At));
        paths.AddRange(charter.Slices.Select(s => s.At));
        string[] places = [.. paths.SelectMany(p => p!.Places).Distinct()];
        if (places.Any(place => HasDuplicate(document.RootElement, Tokens(place))))
        {
            return DecodedRecord.Rejected(RejectReason.DuplicateKey);
        }

        return places.Any(place => Find(document.RootElement, Tokens(place)) is { } e && e.ValueKind == JsonValueKind.String && Text(e) is null)
            ? DecodedRecord.Rejected(RejectReason.LoneSurrogate)
            : Values(document.RootElement, charter, layout, hasher);
    }

    private static RejectReason Syntax(byte[] line)
    {
        if (line.All(b => b is (byte)' ' or (byte)'\t' or (byte)'\r' or (byte)'\n'))
        {
            return RejectReason.BlankLine;
        }

        if (line.Length > JsonRecordDecoder.MaximumLength)
        {
            return RejectReason.TooLong;
        }

        try
        {
            _ = Strict.GetCharCount(line);
            Utf8JsonReader reader = new(line, new JsonReaderOptions { MaxDepth = 64 });
            while (reader.Read())
            {
            }

            return RejectReason.None;
        }
        catch (DecoderFallbackException)
        {
            return RejectReason.InvalidUtf8;
        }
        catch (JsonException e)
        {
            return e.Message.Contains("maximum configured depth", StringComparison.Ordinal) ? RejectReason.TooDeep : RejectReason.MalformedJson;
        }
    }

    private static DecodedRecord Values(JsonElement root, Charter charter, RecordLayout layout, IdHasher hasher)
    {
        JsonElement? id = First(root, charter.RecordId!), revision = First(root, charter.Revision!), time = First(root, charter.Time!.At);
        if (IsNoText(id))
        {
            return DecodedRecord.Rejected(RejectReason.BadId);
        }

        if (string.IsNullOrEmpty(Text(id)))
        {
            return DecodedRecord.Rejected(RejectReason.MissingId);
        }

        if (IsNoText(revision))
        {
            return DecodedRecord.Rejected(RejectReason.BadId);
        }

        if (time is { ValueKind: JsonValueKind.Object or JsonValueKind.Array })
        {
            return DecodedRecord.Rejected(RejectReason.BadTime);
        }

        if (string.IsNullOrEmpty(Text(time)))
        {
            return DecodedRecord.Rejected(RejectReason.MissingTime);
        }

        if (Microseconds(Text(time)!) is not { } moment || moment < YearOf(1000) || moment >= YearOf(9000))
        {
            return DecodedRecord.Rejected(RejectReason.BadTime);
        }

        JsonElement? decision = First(root, charter.Decision!.At);
        string? decided = Text(decision);
        if (decided?.Length == 0 || decision is null)
        {
            return DecodedRecord.Rejected(RejectReason.MissingDecision);
        }

        DecisionCode? code = charter.Decision.Favourable.Contains(decided) ? DecisionCode.Favourable
            : charter.Decision.Unfavourable.Contains(decided) ? DecisionCode.Unfavourable
            : charter.Decision.Other.Contains(decided) ? DecisionCode.Other : null;
        if (code is null)
        {
            return DecodedRecord.Rejected(RejectReason.UnknownDecision);
        }

        string? outcome = Text(First(root, charter.Outcome!.At));
        byte[] key = Encoding.UTF8.GetBytes(Text(id)!);
        return new DecodedRecord(
            RejectReason.None,
            hasher.Hash([.. key, IdHasher.Separator, .. Encoding.UTF8.GetBytes(Text(revision) ?? "")]),
            hasher.Hash([.. key, IdHasher.Separator]),
            moment,
            code.Value,
            charter.Outcome.Positive.Contains(outcome) ? OutcomeCode.Positive : charter.Outcome.Negative.Contains(outcome) ? OutcomeCode.Negative : OutcomeCode.Unknown,
            Score(First(root, charter.Score!.At), charter.Score),
            string.Join(' ', layout.Fields.Select(f => Code(First(root, f.At), f))),
            string.Join('|', charter.Slices.Select(s => Text(First(root, s.At)) ?? "")));
    }

    private static int Code(JsonElement? element, CodedField field)
    {
        if (element is null)
        {
            return field.MissingCode;
        }

        string? text = Text(element);
        if (text is null)
        {
            return field.UnlistedCode;
        }

        if (text.Length == 0 || field.Missing.Contains(text))
        {
            return field.MissingCode;
        }

        if (field.Declined.Contains(text))
        {
            return field.DeclinedCode;
        }

        if (field.Values is not null)
        {
            int at = field.Values.ToList().IndexOf(text);
            return at < 0 ? field.UnlistedCode : at;
        }

        int bands = Number(text) is { } number ? field.Bands!.Count(cut => cut <= number) : 0;
        return bands == 0 ? field.UnlistedCode : bands - 1;
    }

    private static long Score(JsonElement? element, ScoreField score)
    {
        if (element is null || Text(element)?.Length == 0)
        {
            return RecordBatch.MissingScore;
        }

        return Text(element) is { } text && Number(text) is { } number && number >= score.Low && number <= score.High
            ? (long)Math.Round((number - score.Low) / (score.High - score.Low) * Math.Pow(2, 40))
            : RecordBatch.UnlistedScore;
    }

    private static double? Number(string text) =>
        text.All(c => c is >= '0' and <= '9' or '.' or '-' or '+' or 'e' or 'E')
        && double.TryParse(text, NumberStyles.Float, CultureInfo.InvariantCulture, out double value) && double.IsFinite(value) ? value : null;

    private static long YearOf(int year) => (new DateTime(year, 1, 1) - new DateTime(1970, 1, 1)).Ticks / 10;

    private static bool IsNoText(JsonElement? element) => element is { ValueKind: not (JsonValueKind.String or JsonValueKind.Number) };

    /// <summary>The text of a scalar; null for containers, for nothing and for a string that is no text.</summary>
    private static string? Text(JsonElement? element)
    {
        try
        {
            return element?.ValueKind switch
            {
                JsonValueKind.String => element.Value.GetString(),
                JsonValueKind.Number or JsonValueKind.True or JsonValueKind.False => element.Value.GetRawText(),
                _ => null,
            };
        }
        catch (InvalidOperationException)
        {
            return null;
        }
    }

    private static JsonElement? First(JsonElement root, FieldPath path) => path.Places
        .Select(place => Find(root, Tokens(place)))
        .FirstOrDefault(e => e is not null && e.Value.ValueKind != JsonValueKind.Null);

    private static JsonElement? Find(JsonElement element, string[] tokens)
    {
        foreach (string token in tokens)
        {
            JsonElement[] next = [.. Children(element, token)];
            if (next.Length == 0)
            {
                return null;
            }

            element = next[^1];
        }

        return element;
    }

    private static bool HasDuplicate(JsonElement element, string[] tokens)
    {
        foreach (string token in tokens)
        {
            JsonElement[] next = [.. Children(element, token)];
            if (next.Length != 1)
            {
                return next.Length > 1;
            }

            element = next[0];
        }

        return false;
    }

    private static IEnumerable<JsonElement> Children(JsonElement element, string token)
    {
        if (element.ValueKind == JsonValueKind.Array)
        {
            return int.TryParse(token, NumberStyles.None, CultureInfo.InvariantCulture, out int index)
                && index.ToString(CultureInfo.InvariantCulture) == token && index < element.GetArrayLength() ? [element[index]] : [];
        }

        return element.ValueKind == JsonValueKind.Object ? element.EnumerateObject().Where(p => NameOf(p) == token).Select(p => p.Value) : [];
    }

    private static string? NameOf(JsonProperty property)
    {
        try
        {
            return property.Name;
        }
        catch (InvalidOperationException)
        {
            return null;
        }
    }

    /// <summary>
    /// The grammar of RFC 3339, section 5.6: T and Z in either case, and a space for the T, which its note allows; an offset of at
    /// most 23:59. A leap second, "23:59:60", is not drawn by these tests: TimeParserTests has it.
    /// </summary>
    private static long? Microseconds(string text)
    {
        Match match = Rfc3339().Match(text);
        if (!match.Success || !DateTime.TryParseExact(
            $"{match.Groups[1].Value}T{match.Groups[2].Value}", "yyyy-MM-dd'T'HH:mm:ss", CultureInfo.InvariantCulture, DateTimeStyles.None, out DateTime local))
        {
            return null;
        }

        string fraction = match.Groups[3].Value.PadRight(6, '0')[..6];
        string zone = match.Groups[4].Value;
        long offset = 0;
        if (zone.Length > 1)
        {
            int hours = int.Parse(zone[1..3], CultureInfo.InvariantCulture), minutes = int.Parse(zone[4..], CultureInfo.InvariantCulture);
            if (hours > 23 || minutes > 59)
            {
                return null;
            }

            offset = (zone[0] == '-' ? -1 : 1) * ((hours * 60L) + minutes) * TimeSpan.TicksPerMinute;
        }

        long ticks = local.Ticks - offset;
        return ticks < DateTime.MinValue.Ticks || ticks > DateTime.MaxValue.Ticks
            ? null
            : ((ticks - DateTime.UnixEpoch.Ticks) / 10) + int.Parse(fraction, CultureInfo.InvariantCulture);
    }

    [GeneratedRegex("\\A([0-9]{4}-[0-9]{2}-[0-9]{2})[Tt ]([0-9]{2}:[0-9]{2}:[0-9]{2})(?:\\.([0-9]+))?([Zz]|[+-][0-9]{2}:[0-9]{2})\\z", RegexOptions.CultureInvariant)]
    private static partial Regex Rfc3339();

    // RFC 6901, section 4: first ~1, then ~0.
    private static string[] Tokens(string place) => place.StartsWith('/')
        ? [.. place[1..].Split('/').Select(t => t.Replace("~1", "/", StringComparison.Ordinal).Replace("~0", "~", StringComparison.Ordinal))]
        : [place];
}
