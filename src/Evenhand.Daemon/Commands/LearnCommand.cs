using System.CommandLine;
using System.Globalization;
using Evenhand.Circuits.Files;
using Evenhand.Circuits.Learning;
using Evenhand.Circuits.Profiles;
using Evenhand.Daemon.Hosting;
using Evenhand.Daemon.Learning;
using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Population;
using Microsoft.Extensions.DependencyInjection;

namespace Evenhand.Daemon.Commands;

/// <summary><c>evenhand learn</c>: learns a circuit from a training sample.</summary>
internal sealed class LearnCommand
{
    private const double DefaultHoldout = 0.1;
    private const int MostProfiles = 256;

    private readonly Argument<string> _charter = new("CHARTER") { Description = "The charter file; for learning alone it may have inputs only." };
    private readonly Argument<string[]> _inputs = new("INPUT")
    {
        Arity = ArgumentArity.OneOrMore,
        Description = "The training sample: NDJSON, CSV or Parquet, each also compressed by gzip; - is stdin.",
    };

    private readonly Option<string> _out = new("--out") { HelpName = "CIRCUIT", Required = true, Description = "Write the circuit file here." };
    private readonly Option<string?> _profiles = new("--profiles") { HelpName = "K|auto", Description = "Number of profiles, or auto: chosen on held-out records. Default: the charter's, else 16." };
    private readonly Option<string?> _holdout = new("--holdout") { HelpName = "FRACTION|FILE", Description = "Held-out records: a share of the sample, or a file of their own. Default: 0.1." };
    private readonly Option<string?> _test = new("--test") { HelpName = "FILE", Description = "Records that take no part in any choice; only measured at the end." };
    private readonly Option<int> _seed = new("--seed") { HelpName = "N", Description = "Seed of starts, orders and splits.", DefaultValueFactory = _ => 1 };
    private readonly Option<bool> _json = new("--json") { Description = "Print the report as one JSON document instead of tables." };
    private readonly Terminal _terminal;
    private readonly TimeProvider _clock;

    private LearnCommand(IServiceProvider services)
    {
        _terminal = services.GetRequiredService<Terminal>();
        _clock = services.GetRequiredService<TimeProvider>();
    }

    /// <summary>The command.</summary>
    public static Command Create(IServiceProvider services)
    {
        LearnCommand learn = new(services);
        Command command = new("learn", "Learns a circuit of the population from a training sample, missing values allowed, and states how good it is.");
        command.Arguments.Add(learn._charter);
        command.Arguments.Add(learn._inputs);
        foreach (Option option in (Option[])[learn._out, learn._profiles, learn._holdout, learn._test, learn._seed, learn._json])
        {
            command.Options.Add(option);
        }

        command.SetAction(learn.Run);
        return command;
    }

    private int Run(ParseResult parsed)
    {
        Charter charter = CharterFile.Load(parsed.GetRequiredValue(_charter), CharterUse.Learning);
        if (charter.Inputs.Count == 0)
        {
            throw new CommandFailure(2, "the charter has no `inputs`: a circuit needs at least one field to learn");
        }

        string[] inputs = parsed.GetRequiredValue(_inputs);
        using OutputFile file = OutputFile.Open("--out", parsed.GetRequiredValue(_out), [parsed.GetRequiredValue(_charter), .. inputs, parsed.GetValue(_holdout), parsed.GetValue(_test)]);
        int? profiles = Profiles(parsed.GetValue(_profiles), charter);
        (double share, string? holdout) = Holdout(parsed.GetValue(_holdout));
        using ProgressBar? bar = _terminal.ShowsProgress ? new ProgressBar(_terminal.Error, _clock) : null;
        PopulationSample sample = Read(charter, inputs, bar);
        Charter cut = sample.Cut();
        TrainingTable all = sample.Table(cut);
        (TrainingTable learned, TrainingTable held) = holdout is null
            ? all.Split(share, parsed.GetValue(_seed))
            : (all, Read(cut, [holdout], bar).Table(cut, sample));
        TrainingTable? test = parsed.GetValue(_test) is { } testing ? Read(cut, [testing], bar).Table(cut, sample) : null;
        LearningOptions options = new() { Profiles = profiles ?? 1, Seed = parsed.GetValue(_seed) };
        void learning(double done) => bar?.Report("learning", done);
        ProfileCircuit circuit = (profiles is null ? ProfileSelection.Learn(learned, held, options, learning) : new ProfileLearner(learned, held, options, learning).Learn()).Circuit;
        LearnReport report = new()
        {
            Circuit = circuit,
            Sample = sample,
            Learned = learned.Records,
            HeldOut = HeldOutLikelihood.Of(circuit, learned, held),
            Test = test is null ? null : HeldOutLikelihood.Of(circuit, learned, test),
            Calibrations = [.. Calibrations(circuit, held)],
        };
        ProfileFile.Write(circuit, file.Stream, json =>
        {
            json.WritePropertyName("learned");
            report.ToJson().WriteTo(json);
        });
        file.Complete();
        bar?.Dispose();
        Print(report, parsed.GetValue(_json));
        return 0;
    }

    private static IEnumerable<(string Of, Calibration Calibration)> Calibrations(ProfileCircuit circuit, TrainingTable held)
    {
        if (Calibration.OfDecision(circuit, held) is { } decision)
        {
            yield return ($"{held.Decision!.Name} | inputs", decision);
        }

        for (int g = 0; g < held.Groups.Count; g++)
        {
            yield return ($"{held.Groups[g].Name} | inputs{(held.Decision is null ? "" : $", {held.Decision.Name}")}", Calibration.OfGroup(circuit, held, g));
        }
    }

    private PopulationSample Read(Charter charter, IReadOnlyList<string> inputs, ProgressBar? bar)
    {
        PopulationSample sample = SampleReader.Read(charter, inputs, bar is null ? null : (name, done) => bar.Report(name, done));
        if (sample.Records < 2)
        {
            throw new CommandFailure(2, string.Create(
                CultureInfo.InvariantCulture,
                $"{string.Join(", ", inputs)}: {sample.Records} usable records of {sample.Read:N0} read ({sample.Rejected:N0} rejected); learning needs two at least"));
        }

        if (sample.Rejected > 0)
        {
            _terminal.Error.WriteLine(string.Create(CultureInfo.InvariantCulture, $"evenhand: {string.Join(", ", inputs)}: {sample.Rejected:N0} of {sample.Read:N0} records were rejected; replay says why"));
        }

        return sample;
    }

    private static int? Profiles(string? text, Charter charter)
    {
        if (text is null)
        {
            return charter.Circuit is null ? 16 : charter.Circuit.Profiles;
        }

        if (text == "auto")
        {
            return null;
        }

        return int.TryParse(text, NumberStyles.None, CultureInfo.InvariantCulture, out int k) && k is >= 1 and <= MostProfiles
            ? k
            : throw new CommandFailure(2, $"--profiles {text}: give a whole number from 1 to {MostProfiles}, or auto");
    }

    private static (double Share, string? File) Holdout(string? text)
    {
        if (text is null)
        {
            return (DefaultHoldout, null);
        }

        if (!double.TryParse(text, NumberStyles.Float, CultureInfo.InvariantCulture, out double share))
        {
            return (0, text);
        }

        return share is > 0 and < 1
            ? (share, null)
            : throw new CommandFailure(2, $"--holdout {text}: give a share above 0 and below 1, or a file");
    }

    private void Print(LearnReport report, bool asJson)
    {
        if (asJson)
        {
            _terminal.Out.WriteLine(report.ToJson().ToJsonString());
        }
        else
        {
            report.Write(_terminal.Out);
        }
    }
}
