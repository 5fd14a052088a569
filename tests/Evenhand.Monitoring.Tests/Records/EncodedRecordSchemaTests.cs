using System.Text;
using System.Text.Json.Nodes;
using Evenhand.Monitoring.Records;
using Evenhand.Testing;
using Xunit;

namespace Evenhand.Monitoring.Tests.Records;

/// <summary>The shipped schema describes what the decoder makes of records.</summary>
public sealed class EncodedRecordSchemaTests
{
    private static readonly ShippedSchema Schema = new(Text());

    [Theory]
    [InlineData("""{"case":"c1","n":2,"at":"2031-03-01T00:00:00Z","decision":"fast","people":[{"language":"hill"},{"age":40}],"meta":{"score":0.25,"version":"3.2"},"upheld":"yes"}""")]
    [InlineData("""{"case":"c1","n":2,"at":"1000-01-01T00:00:00Z","decision":"withdrawn","people":[{"language":"elvish"},{"age":-1}],"meta":{"score":7}}""")]
    [InlineData("""{"case":"c1","n":2,"at":"8999-12-31T23:59:59.999999Z","decision":0,"a/b":{"m~n":"quay"},"meta":{"score":1}}""")]
    public void Record_AsDecoded_IsValid(string json) => Assert.Equal("", Schema.Errors(Decoded(json)));

    [Fact]
    public void Record_WithAMemberOutOfRange_IsNotValid()
    {
        const string Json = """{"case":"c1","n":2,"at":"2031-03-01T00:00:00Z","decision":"fast"}""";
        (string Key, JsonNode? Value)[] wrong =
        [
            ("time", "2031-03-01"), ("id", "C1"), ("case_id", new string('0', 31)), ("decision", 3), ("outcome", -1), ("score", -3),
            ("score", RecordBatch.ScoreUnit + 1), ("codes", new JsonArray(65536)), ("slices", new JsonArray(1)), ("position", -1), ("surprise", 1),
        ];
        foreach ((string key, JsonNode? value) in wrong)
        {
            JsonObject record = Decoded(Json);
            record[key] = value;
            Assert.True(Schema.Errors(record).Length > 0, key);
        }

        foreach (string key in Decoded(Json).Select(p => p.Key).ToArray())
        {
            JsonObject record = Decoded(Json);
            record.Remove(key);
            Assert.True(Schema.Errors(record).Length > 0, key);
        }
    }

    private static JsonObject Decoded(string json)
    {
        RecordBatch batch = new(PlacesCharter.Layout, 1);
        PlacesCharter.NewDecoder().Decode(Encoding.UTF8.GetBytes(json), batch, 5);
        EncodedRecord record = EncodedRecord.Of(batch, 0);
        return new JsonObject
        {
            ["time"] = record.Time,
            ["id"] = Hex(record.Id),
            ["case_id"] = Hex(record.CaseId),
            ["decision"] = (int)record.Decision,
            ["outcome"] = (int)record.Outcome,
            ["score"] = record.Score,
            ["codes"] = new JsonArray([.. record.Codes.Select(c => (JsonNode?)(int)c)]),
            ["slices"] = new JsonArray([.. record.Slices.Select(s => (JsonNode?)s)]),
            ["position"] = record.Position,
        };
    }

    private static string Hex(IdHash hash) => $"{hash.High:x16}{hash.Low:x16}";

    private static string Text()
    {
        using StreamReader reader = new(typeof(RecordBatch).Assembly.GetManifestResourceStream("encoded-record.schema.json")!);
        return reader.ReadToEnd();
    }
}
