using System.CommandLine;
using System.Text.Json.Nodes;
using Evenhand.Circuits.Files;
using Evenhand.Circuits.Queries;
using Evenhand.Circuits.Structure;
using Evenhand.Daemon.Hosting;
using Evenhand.Daemon.Learning;
using Microsoft.Extensions.DependencyInjection;

namespace Evenhand.Daemon.Commands;

/// <summary><c>evenhand ask</c>: exact answers from a circuit file.</summary>
internal sealed class AskCommand
{
    private readonly Argument<string> _circuit = new("CIRCUIT") { Description = "The circuit file." };
    private readonly Option<string[]> _given = new("--given") { HelpName = "EVIDENCE", Description = "What is known: name=value, name=a|b (one of), name=lo..hi (half-open, either end may be empty)." };
    private readonly Option<string[]> _of = new("--of") { HelpName = "VARIABLE", Description = "The distribution of these variables.", AllowMultipleArgumentsPerToken = true };
    private readonly Option<string[]> _mean = new("--mean") { HelpName = "VARIABLE", Description = "Mean and standard deviation of these numbers.", AllowMultipleArgumentsPerToken = true };
    private readonly Option<bool> _logLikelihood = new("--log-likelihood") { Description = "The probability of what is known and its natural logarithm (a density where a continuous number is known)." };
    private readonly Option<bool> _mostLikely = new("--most-likely") { Description = "The likeliest completion; needs a deterministic circuit." };
    private readonly Option<string?> _divergence = new("--divergence") { HelpName = "OTHER", Description = "The Kullback-Leibler divergence from another circuit of one structure, both deterministic; under what is known." };
    private readonly Option<bool> _json = new("--json") { Description = "Print one JSON document instead of tables." };
    private readonly Terminal _terminal;

    private AskCommand(Terminal terminal) => _terminal = terminal;

    /// <summary>The command.</summary>
    public static Command Create(IServiceProvider services)
    {
        AskCommand ask = new(services.GetRequiredService<Terminal>());
        Command command = new("ask", "Answers questions about a population exactly, from a circuit file.");
        command.Arguments.Add(ask._circuit);
        foreach (Option option in (Option[])[ask._given, ask._of, ask._mean, ask._logLikelihood, ask._mostLikely, ask._divergence, ask._json])
        {
            command.Options.Add(option);
        }

        command.SetAction(ask.Run);
        return command;
    }

    private int Run(ParseResult parsed)
    {
        bool isAsked = parsed.GetValue(_of)!.Length > 0 || parsed.GetValue(_mean)!.Length > 0 || parsed.GetValue(_logLikelihood)
            || parsed.GetValue(_mostLikely) || parsed.GetValue(_divergence) is not null;
        if (!isAsked)
        {
            throw new CommandFailure(2, "say what to ask: --of, --mean, --log-likelihood, --most-likely or --divergence");
        }

        string file = parsed.GetRequiredValue(_circuit);
        Circuit circuit = Read(file);
        JsonObject answer;
        try
        {
            answer = Answer(circuit, parsed);
        }
        catch (CircuitException e)
        {
            throw new CommandFailure(2, e.Message);
        }

        if (parsed.GetValue(_json))
        {
            _terminal.Out.WriteLine(answer.ToJsonString());
        }
        else
        {
            AnswerTable.Write(answer, _terminal.Out);
        }

        return 0;
    }

    private JsonObject Answer(Circuit circuit, ParseResult parsed)
    {
        Factors evidence = Given(circuit, parsed);
        Scaled probability = CircuitQueries.Probability(circuit, evidence);
        if (probability.IsZero)
        {
            throw new CircuitException(CircuitQueries.ZeroEvidence);
        }

        JsonObject answer = new() { ["evidence"] = probability.ToDouble(), ["log_evidence"] = probability.Log };
        if (parsed.GetValue(_of) is { Length: > 0 } of)
        {
            answer["distributions"] = Distributions(circuit, of, evidence);
        }

        if (parsed.GetValue(_mean) is { Length: > 0 } means)
        {
            answer["means"] = new JsonObject(means.Distinct().Select(name => KeyValuePair.Create(name, (JsonNode?)Mean(circuit, name, evidence))));
        }

        if (parsed.GetValue(_mostLikely))
        {
            answer["most_likely"] = MostLikely(circuit, evidence);
        }

        if (parsed.GetValue(_divergence) is { } other)
        {
            answer["divergence"] = Divergence(circuit, evidence, Read(other), parsed);
        }

        return answer;
    }

    private Factors Given(Circuit circuit, ParseResult parsed)
    {
        Factors evidence = Factors.None(circuit);
        foreach (string text in parsed.GetValue(_given)!)
        {
            evidence = EvidenceText.Add(text, circuit, evidence);
        }

        return evidence;
    }

    private static JsonObject Distributions(Circuit circuit, string[] names, Factors evidence)
    {
        double[]?[] posteriors = CircuitQueries.Posteriors(circuit, evidence);
        JsonObject distributions = [];
        foreach (string name in names.Distinct())
        {
            Variable variable = circuit.Variables[EvidenceText.VariableOf(name, circuit)];
            double[] p = posteriors[circuit.IndexOf(name)]
                ?? throw new CircuitException($"{name} is continuous and has no list of states; ask for its --mean, or for the probability of an interval with --given and --log-likelihood");
            distributions[name] = new JsonObject(p.Select((value, state) => KeyValuePair.Create(variable.Values[state], (JsonNode?)value)));
        }

        return distributions;
    }

    private static JsonObject Mean(Circuit circuit, string name, Factors evidence)
    {
        (double mean, double deviation) = CircuitQueries.Moments(circuit, EvidenceText.VariableOf(name, circuit), evidence);
        return new JsonObject { ["mean"] = mean, ["sd"] = deviation };
    }

    private static JsonObject MostLikely(Circuit circuit, Factors evidence)
    {
        (double[] answers, double logProbability) = CircuitQueries.MostLikely(circuit, evidence);
        JsonObject values = [];
        for (int v = 0; v < answers.Length; v++)
        {
            Variable variable = circuit.Variables[v];
            if (!double.IsNaN(answers[v]))
            {
                values[variable.Name] = variable.IsContinuous ? answers[v] : variable.Values[(int)answers[v]];
            }
        }

        return new JsonObject { ["values"] = values, ["log_probability"] = logProbability };
    }

    private JsonObject Divergence(Circuit circuit, Factors evidence, Circuit other, ParseResult parsed)
    {
        // The evidence holds for both: what is compared is what is left open.
        bool isGiven = parsed.GetValue(_given)!.Length > 0;
        double divergence = isGiven
            ? Circuits.Queries.Divergence.Of(Conditioning.On(circuit, evidence), Conditioning.On(other, Given(other, parsed)))
            : Circuits.Queries.Divergence.Of(circuit, other);
        return double.IsPositiveInfinity(divergence)
            ? new JsonObject { ["kl"] = null, ["note"] = "infinite: the other circuit excludes what this one allows" }
            : new JsonObject { ["kl"] = divergence };
    }

    private static Circuit Read(string file)
    {
        try
        {
            using FileStream stream = File.OpenRead(file);
            return CircuitReader.Read(stream);
        }
        catch (CircuitException e)
        {
            throw new CommandFailure(2, $"{file}: {e.Message}");
        }
        catch (Exception e) when (e is FileNotFoundException or DirectoryNotFoundException)
        {
            throw new CommandFailure(2, $"{file}: no such file; check the name");
        }
        catch (Exception e) when (e is IOException or UnauthorizedAccessException)
        {
            throw new CommandFailure(2, $"{file}: cannot be read ({e.Message})");
        }
    }
}
