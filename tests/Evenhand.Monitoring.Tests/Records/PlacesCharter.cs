using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Records;

namespace Evenhand.Monitoring.Tests.Records;

/// <summary>A charter whose places are of every kind: nested, in arrays, with escaped tokens, several for one field, one for several fields.</summary>
internal static class PlacesCharter
{
    public static readonly Charter Charter = new()
    {
        Id = "flood-grants",
        Title = "Flood-repair grants",
        RecordId = new FieldPath(["case"]),
        Revision = new FieldPath(["/n"]),
        Time = new TimeField(new FieldPath(["/at", "/meta/at"]), TimeUnit.Rfc3339),
        Decision = new DecisionField(new FieldPath(["/decision"]), ["fast", "true"], ["slow", "0"], ["withdrawn"]),
        Score = new ScoreField(new FieldPath(["/meta/score"]), -1, 1),
        Outcome = new OutcomeField(new FieldPath(["/upheld"]), ["yes", "true"], ["no", "false"], new CharterDuration("30d", TimeSpan.FromDays(30)), OutcomeObservation.Any),
        Slices = [new SliceField("version", new FieldPath(["/meta/version"]), null), new SliceField("office", new FieldPath(["/a~1b/m~0n"]), null)],
        Groups =
        [
            new GroupField { Name = "language", At = new FieldPath(["/people/0/language", "/language"]), Values = ["river", "hill", "1", "true"], Missing = ["unknown"], Declined = ["not_stated"] },
            new GroupField { Name = "age", At = new FieldPath(["/people/1/age"]), Bands = [18, 40] },
        ],
        Inputs =
        [
            new InputField { Name = "office", At = new FieldPath(["/a~1b/m~0n"]), Values = ["quay", "é"] },
            new InputField { Name = "nameless", At = new FieldPath(["/"]), Bands = [0] },
            new InputField { Name = "tag", At = new FieldPath(["/people/01", "/list/2"]), Values = ["x", ""] },
        ],
    };

    public static readonly RecordLayout Layout = new(Charter);

    public static readonly IdHasher Hasher = new(new byte[IdHasher.KeyLength]);

    public static JsonRecordDecoder NewDecoder(RecordKind kind = RecordKind.Decision) => new(Charter, Layout, Hasher, kind);
}
