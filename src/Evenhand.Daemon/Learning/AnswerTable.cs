using System.Globalization;
using System.Text.Json.Nodes;
using Evenhand.Daemon.Hosting;
using Spectre.Console;

namespace Evenhand.Daemon.Learning;

/// <summary>Answers from a circuit as tables that a person can read.</summary>
internal static class AnswerTable
{
    private const int Width = 120;

    /// <summary>Writes an answer.</summary>
    public static void Write(JsonObject answer, TextWriter to)
    {
        IAnsiConsole console = AnsiConsole.Create(new AnsiConsoleSettings
        {
            Out = new AnsiConsoleOutput(new PrintableWriter(to)),
            Ansi = AnsiSupport.No,
            ColorSystem = ColorSystemSupport.NoColors,
            Interactive = InteractionSupport.No,
        });
        console.Profile.Width = Width;
        console.WriteLine($"What is given has probability {Number(answer["evidence"])}, its natural logarithm is {Number(answer["log_evidence"])}.");
        foreach ((string variable, JsonNode? states) in answer["distributions"]?.AsObject() ?? [])
        {
            Table table = Plain(variable, "probability");
            foreach ((string state, JsonNode? p) in states!.AsObject())
            {
                table.AddRow(Markup.Escape(state), Number(p));
            }

            console.Write(table);
        }

        if (answer["means"] is JsonObject means)
        {
            Table table = Plain("number", "mean", "standard deviation");
            foreach ((string variable, JsonNode? mean) in means)
            {
                table.AddRow(Markup.Escape(variable), Number(mean!["mean"]), Number(mean["sd"]));
            }

            console.Write(table);
        }

        WriteMostLikely(answer["most_likely"], console);
        if (answer["divergence"] is { } divergence)
        {
            console.WriteLine($"Kullback-Leibler divergence: {(divergence["kl"] is { } kl ? $"{Number(kl)} nats" : (string)divergence["note"]!)}");
        }
    }

    private static void WriteMostLikely(JsonNode? mostLikely, IAnsiConsole console)
    {
        if (mostLikely is null)
        {
            return;
        }

        Table table = Plain("variable", "likeliest");
        foreach ((string variable, JsonNode? value) in mostLikely["values"]!.AsObject())
        {
            table.AddRow(Markup.Escape(variable), Markup.Escape(value!.ToString()));
        }

        console.Write(table);
        console.WriteLine($"The natural logarithm of the probability of all of it is {Number(mostLikely["log_probability"])}.");
    }

    private static Table Plain(params string[] columns) => new Table().Border(TableBorder.Simple).AddColumns([.. columns.Select(Markup.Escape)]);

    private static string Number(JsonNode? number) => ((double)number!).ToString("G10", CultureInfo.InvariantCulture);
}
