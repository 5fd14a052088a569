using System.Globalization;
using System.Text.Json.Nodes;
using Evenhand.Circuits.Learning;
using Evenhand.Circuits.Profiles;
using Evenhand.Daemon.Hosting;
using Evenhand.Monitoring.Population;
using Spectre.Console;

namespace Evenhand.Daemon.Learning;

/// <summary>What a learned circuit is worth, as a table that a person can read and as JSON.</summary>
internal sealed class LearnReport
{
    private const int Width = 120;

    /// <summary>The circuit.</summary>
    public required ProfileCircuit Circuit { get; init; }

    /// <summary>The sample as read.</summary>
    public required PopulationSample Sample { get; init; }

    /// <summary>Records learned from, without held-out ones.</summary>
    public required int Learned { get; init; }

    /// <summary>On held-out records.</summary>
    public required HeldOutLikelihood HeldOut { get; init; }

    /// <summary>On test records; null without.</summary>
    public HeldOutLikelihood? Test { get; init; }

    /// <summary>Calibrations on held-out records, by what is predicted.</summary>
    public required IReadOnlyList<(string Of, Calibration Calibration)> Calibrations { get; init; }

    /// <summary>The report as JSON.</summary>
    public JsonObject ToJson()
    {
        JsonObject json = new()
        {
            ["records"] = Sample.Records,
            ["fields"] = Circuit.Shape.Fields.Count,
            ["profiles"] = Circuit.Shape.Profiles,
            ["held_out"] = ToJson(HeldOut),
        };
        if (Test is not null)
        {
            json["test"] = ToJson(Test);
        }

        json["learned_from"] = Learned;
        json["left_out"] = new JsonObject { ["rejected"] = Sample.Rejected, ["other"] = Sample.Other, ["unlisted_or_declined"] = Sample.Unlisted };
        json["missing"] = new JsonObject(Sample.MissingShares().Select(s => KeyValuePair.Create(s.Key, (JsonNode?)s.Value)));
        json["calibration"] = new JsonArray([.. Calibrations.Select(c => (JsonNode)ToJson(c.Of, c.Calibration))]);
        return json;
    }

    /// <summary>Writes the tables.</summary>
    public void Write(TextWriter to)
    {
        IAnsiConsole console = AnsiConsole.Create(new AnsiConsoleSettings
        {
            Out = new AnsiConsoleOutput(new PrintableWriter(to)),
            Ansi = AnsiSupport.No,
            ColorSystem = ColorSystemSupport.NoColors,
            Interactive = InteractionSupport.No,
        });
        console.Profile.Width = Width;
        console.WriteLine(string.Create(
            CultureInfo.InvariantCulture,
            $"{Sample.Records:N0} records of {Sample.Read:N0} read ({Sample.Rejected:N0} rejected, {Sample.Other:N0} with another decision, {Sample.Unlisted:N0} with an unlisted or declined label)"));
        console.WriteLine(string.Create(
            CultureInfo.InvariantCulture,
            $"{Counted(Circuit.Shape.Fields.Count, "field")}, {Counted(Circuit.Shape.Groups.Count, "group")}, {Counted(Circuit.Shape.Profiles, "profile")}, learned from {Learned:N0} records"));
        console.WriteLine();
        console.WriteLine("Log-likelihood, nats a record (higher is better)");
        Table likelihood = Plain("records", "", "circuit", "independence", "observed tree");
        AddRow(likelihood, "held out", HeldOut);
        if (Test is not null)
        {
            AddRow(likelihood, "test", Test);
        }

        console.Write(likelihood);
        WriteMissing(console);
        WriteCalibration(console);
    }

    private static void AddRow(Table table, string name, HeldOutLikelihood of) => table.AddRow(
        string.Create(CultureInfo.InvariantCulture, $"{of.Records:N0}"), name, Number(of.LogLikelihood, "0.0000"), Number(of.Independence, "0.0000"), Number(of.Tree, "0.0000"));

    private void WriteMissing(IAnsiConsole console)
    {
        KeyValuePair<string, double>[] shares = [.. Sample.MissingShares().Where(s => s.Value > 0)];
        console.WriteLine();
        if (shares.Length == 0)
        {
            console.WriteLine("No value is missing.");
            return;
        }

        Table table = Plain("field", "missing, %");
        foreach ((string field, double share) in shares)
        {
            table.AddRow(Markup.Escape(field), Number(100 * share, "0.0"));
        }

        console.Write(table);
    }

    private void WriteCalibration(IAnsiConsole console)
    {
        foreach ((string of, Calibration calibration) in Calibrations)
        {
            console.WriteLine();
            console.WriteLine(string.Create(CultureInfo.InvariantCulture, $"Calibration of P({of}) on held-out records: mean error {calibration.Error:0.000} over {calibration.Predictions:N0} predictions"));
            Table table = Plain("stated between", "predictions", "mean stated", "came true");
            foreach (CalibrationBin bin in calibration.Bins)
            {
                table.AddRow($"{Number(bin.From, "0.0")} and {Number(bin.To, "0.0")}", string.Create(CultureInfo.InvariantCulture, $"{bin.Predictions:N0}"), Number(bin.Stated, "0.000"), Number(bin.CameTrue, "0.000"));
            }

            console.Write(table);
        }
    }

    private static string Counted(int count, string what) => string.Create(CultureInfo.InvariantCulture, $"{count:N0} {what}{(count == 1 ? "" : "s")}");

    private static Table Plain(params string[] columns) => new Table().Border(TableBorder.Simple).AddColumns(columns);

    private static string Number(double value, string format) => double.IsNaN(value) ? "–" : value.ToString(format, CultureInfo.InvariantCulture);

    private static JsonObject ToJson(HeldOutLikelihood of) => new()
    {
        ["records"] = of.Records,
        ["log_likelihood"] = of.LogLikelihood,
        ["independence"] = of.Independence,
        ["tree"] = of.Tree,
    };

    private static JsonObject ToJson(string of, Calibration calibration) => new()
    {
        ["of"] = of,
        ["predictions"] = calibration.Predictions,
        ["error"] = double.IsNaN(calibration.Error) ? null : calibration.Error,
        ["bins"] = new JsonArray([.. calibration.Bins.Select(b => (JsonNode)new JsonObject
        {
            ["from"] = b.From,
            ["to"] = b.To,
            ["predictions"] = b.Predictions,
            ["stated"] = b.Stated,
            ["came_true"] = b.CameTrue,
        })]),
    };
}
