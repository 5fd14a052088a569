using System.Text;
using Evenhand.Monitoring.Records;

namespace Evenhand.Monitoring.Tests.Records;

/// <summary>An entry of a batch as plain values, to be compared; of a rejection only the reason counts.</summary>
internal sealed record DecodedRecord(RejectReason Reason, IdHash Id, IdHash CaseId, long Time, DecisionCode Decision, OutcomeCode Outcome, long Score, string Codes, string Slices)
{
    public static DecodedRecord Rejected(RejectReason reason) => new(reason, default, default, 0, default, default, 0, "", "");

    public static DecodedRecord Of(RecordBatch batch, int entry) => batch.Rejected[entry] != RejectReason.None
        ? Rejected(batch.Rejected[entry])
        : new DecodedRecord(
            RejectReason.None,
            batch.Ids[entry],
            batch.CaseIds[entry],
            batch.Times[entry],
            batch.Decisions[entry],
            batch.Outcomes[entry],
            batch.Scores[entry],
            string.Join(' ', batch.CodesOf(entry).ToArray()),
            string.Join('|', Enumerable.Range(0, batch.SliceCount).Select(s => Encoding.UTF8.GetString(batch.SliceOf(entry, s)))));
}
