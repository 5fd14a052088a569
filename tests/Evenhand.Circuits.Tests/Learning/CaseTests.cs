using System.Globalization;
using System.Text.Json;
using Evenhand.Circuits.Learning;
using Evenhand.Circuits.Profiles;
using Evenhand.Circuits.Queries;
using Evenhand.Circuits.Structure;
using Evenhand.Testing;
using Xunit;

namespace Evenhand.Circuits.Tests.Learning;

/// <summary>Learning against published values and open tables.</summary>
public sealed class CaseTests
{
    /// <summary>Chow and Liu, IEEE Transactions on Information Theory 14 (1968), table I: joint probabilities as counts out of twenty.</summary>
    [Fact]
    public void ChowLiu_ThePapersExample_HasItsInformationAndTree()
    {
        ReferenceCase given = ReferenceCases.Load("chow_liu").Single(c => c.Id == "chow-liu-1968");
        List<ushort[]> records = [];
        foreach (JsonProperty p in given.Input.GetProperty("joint").EnumerateObject())
        {
            records.AddRange(Enumerable.Repeat(p.Name.Select(c => (ushort)(c - '0')).ToArray(), (int)Math.Round(p.Value.GetDouble() * 20)));
        }

        ushort[][] columns = [.. Enumerable.Range(0, 4).Select(v => records.Select(r => r[v]).ToArray())];
        Check(given, columns, [2, 2, 2, 2], ["x1", "x2", "x3", "x4"]);
        int[] parents = ChowLiuTree.Parents(ChowLiuTree.Information(columns, [2, 2, 2, 2]), 0);
        Assert.Equal((0, 1), (parents[1], parents[2]));
        Assert.Equal(given.Expected.GetProperty("total_mi_tree").GetDouble(), Enumerable.Range(1, 3).Sum(v => PairInformation.Of(columns[v], 2, columns[parents[v]], 2, out _)), 1e-12);
    }

    [Fact]
    public void ChowLiu_MortgageTable_HasTheCasesInformation()
    {
        ReferenceCase given = ReferenceCases.Load("chow_liu").Single(c => c.Id == "chow-liu-hmda");
        CsvTable table = CsvTable.Load("hmda_boston_1990.csv");
        string[] names = [.. given.Input.GetProperty("variables").EnumerateArray().Select(v => v.GetString()!)];
        (ushort[][] columns, int[] states) = Coded(names.Select(n => table.Rows.Select(r => table.Cell(r, n)).ToArray()));

        Check(given, columns, states, names);
        int[] parents = ChowLiuTree.Parents(PlugIn(columns, states), 0);
        double total = Enumerable.Range(0, names.Length).Where(v => parents[v] >= 0).Sum(v => PairInformation.Of(columns[v], states[v], columns[parents[v]], states[parents[v]], out _));
        Assert.Equal(given.Expected.GetProperty("total_mi_tree").GetDouble(), total, 1e-10);
    }

    /// <summary>Goodman's two-class latent structure of the Stouffer–Toby table (Biometrika 61, 1974): a profile circuit that is a star, from the case's start.</summary>
    [Fact]
    public void LatentClasses_FromTheCasesStart_TakeItsFirstStepAndReachItsFit()
    {
        ReferenceCase given = ReferenceCases.Load("em").Single(c => c.Id == "em-latent-class-stouffer-toby");
        Variable[] fields = [.. Enumerable.Range(0, 4).Select(v => Variable.Category($"q{v}", ["first", "second"]))];
        ushort[][] patterns = [.. given.Input.GetProperty("patterns").EnumerateArray().Select(p => p.EnumerateArray().Select(x => (ushort)x.GetInt32()).ToArray())];
        int[] counts = [.. given.Input.GetProperty("counts").EnumerateArray().Select(c => c.GetInt32())];
        ushort[][] columns = [.. Enumerable.Range(0, 4).Select(v => patterns.SelectMany((p, i) => Enumerable.Repeat(p[v], counts[i])).ToArray())];
        ProfileShape shape = new(2, [], null, fields, [-1, 0, 0, 0]);
        JsonElement start = given.Input.GetProperty("start");
        double[] q(int k) => [.. start.GetProperty("q_first")[k].EnumerateArray().Select(x => x.GetDouble())];
        ProfileParameters p = ProfileParameters.Zero(shape);
        p.Cells[0] = 1;
        Array.Fill(p.Patterns, 1);
        for (int k = 0; k < 2; k++)
        {
            p.Weights[k] = start.GetProperty("pi")[k].GetDouble();
            for (int v = 0; v < 4; v++)
            {
                (p.Emissions[v][k], p.Emissions[v][2 + k]) = (q(k)[v], 1 - q(k)[v]);
            }
        }

        (ProfileParameters one, _) = Climb(shape, p, Table([], null, fields, [], [], columns), 1);
        JsonElement after = given.Expected.GetProperty("after_one_iteration");
        Assert.Equal(after.GetProperty("pi")[0].GetDouble(), one.Weights[0], 1e-9);
        Assert.Equal(after.GetProperty("q")[1][3].GetDouble(), one.Emissions[3][1], 1e-9);
        (ProfileParameters fit, double log) = Climb(shape, p, Table([], null, fields, [], [], columns), 4000);
        for (int k = 0; k < 2; k++)
        {
            Assert.Equal(given.Expected.GetProperty("pi")[k].GetDouble(), fit.Weights[k], 1e-7);
            for (int v = 0; v < 4; v++)
            {
                Assert.Equal(given.Expected.GetProperty("q_first_response")[k][v].GetDouble(), fit.Emissions[v][k], 1e-7);
            }
        }

        Assert.Equal(given.Expected.GetProperty("loglik").GetDouble(), log, 1e-8);
    }

    /// <summary>Missing group labels, missing at random given the decision: proportional allocation in closed form.</summary>
    [Fact]
    public void MissingLabels_InOneProfile_AreAllocatedInProportion()
    {
        ReferenceCase given = ReferenceCases.Load("em").Single(c => c.Id == "em-missing-group-label");
        List<(ushort Label, ushort Decision)> records = [];
        foreach ((string group, int label) in ((string, int)[])[("groupA", 0), ("groupB", 1), ("unlabelled", 2)])
        {
            JsonElement counts = given.Input.GetProperty(group);
            records.AddRange(Enumerable.Repeat(((ushort)label, (ushort)1), counts.GetProperty("selected").GetInt32()));
            records.AddRange(Enumerable.Repeat(((ushort)label, (ushort)0), counts.GetProperty("not_selected").GetInt32()));
        }

        Variable group1 = Variable.Category("group", ["A", "B"]), decision = Variable.Category("decision", ["no", "yes"]), field = Variable.Category("field", ["only"]);
        TrainingTable table = Table([group1], decision, [field], [[.. records.Select(r => r.Label)]], [.. records.Select(r => r.Decision)], [[.. records.Select(_ => (ushort)0)]]);
        ProfileShape shape = new(1, [group1], decision, [field], [-1]);
        ProfileParameters start = ProfileParameters.Zero(shape);
        Array.Fill(start.Cells, 0.25);
        Array.Fill(start.Weights, 1);
        Array.Fill(start.Patterns, 0.5);
        start.Emissions[0][0] = 1;
        ProfileParameters fit = Climb(shape, start, table, 300).Fit;

        // Cells: A no, A yes, B no, B yes.
        Assert.Equal(given.Expected.GetProperty("rateA").GetDouble(), fit.Cells[1] / (fit.Cells[0] + fit.Cells[1]), 1e-9);
        Assert.Equal(given.Expected.GetProperty("rateB").GetDouble(), fit.Cells[3] / (fit.Cells[2] + fit.Cells[3]), 1e-9);
        Circuit circuit = new ProfileCircuit(shape, fit).ToCircuit();
        Factors a = EvidenceText.Add("group=A", circuit, Factors.None(circuit));
        Assert.Equal(given.Expected.GetProperty("rateA").GetDouble(), CircuitQueries.Conditional(circuit, EvidenceText.Add("decision=yes", circuit, a), a), 1e-9);
    }

    /// <summary>The observed tree, as a general circuit, gives each record the likelihood that the tree gives it; missing values are summed out.</summary>
    [Fact]
    public void ObservedTree_AsACircuit_AgreesRecordByRecord()
    {
        Random random = new(2);
        int[] states = [2, 3, 2, 4];
        ushort[][] columns = [.. states.Select(s => Enumerable.Range(0, 300).Select(_ => (ushort)random.Next(s + 1)).ToArray())];
        ObservedTree tree = ObservedTree.Fit(columns, states);
        Variable[] variables = [.. states.Select((s, v) => Variable.Category($"v{v}", Enumerable.Range(0, s).Select(x => $"{x}")))];
        Circuit circuit = tree.ToCircuit(variables);
        double sum = 0;
        for (int r = 0; r < 300; r++)
        {
            Factors evidence = Factors.None(circuit);
            for (int v = 0; v < states.Length; v++)
            {
                evidence = columns[v][r] < states[v] ? EvidenceText.Add(string.Create(CultureInfo.InvariantCulture, $"v{v}={columns[v][r]}"), circuit, evidence) : evidence;
            }

            sum += CircuitQueries.Probability(circuit, evidence).Log;
        }

        Assert.Equal(sum / 300, tree.MeanLogLikelihood(columns), 1e-12);
        Assert.True(circuit.IsDeterministic);
    }

    /// <summary>KL of the drift circuit is the general circuits' divergence where every count is positive, and adds up by field.</summary>
    [Fact]
    public void DriftCircuit_AgainstASample_IsTheExactDivergence()
    {
        int[] parents = [-1, 0, 1], states = [2, 3, 2];
        DriftCircuit now = new(parents, states), then = new(parents, states);
        Random random = new(3);
        Circuit[] circuits = [.. ((DriftCircuit[])[now, then]).Select((drift, i) =>
        {
            for (int r = 0; r < 2000; r++)
            {
                ushort a = (ushort)(random.NextDouble() < 0.3 + (0.2 * i) ? 1 : 0), b = (ushort)((a + random.Next(3)) % 3), c = (ushort)(random.Next(3) == 0 ? b % 2 : random.Next(2));
                drift.Add([a, b, c]);
            }

            return FromCounts(drift, parents, states);
        })];
        FieldDrift[] fields = now.Against(then);

        Assert.Equal(Divergence.Of(circuits[0], circuits[1]), fields.Sum(f => f.Divergence), 1e-12);
        Assert.True(fields[0].P < 1e-6);
        DriftCircuit both = new(parents, states);
        both.Add(now);
        both.Add(then);
        Assert.Equal(now.Counts.Zip(then.Counts, (x, y) => x + y), both.Counts);
    }

    /// <summary>The G test of a 2 × 2 table: R. R. Sokal and F. J. Rohlf, "Biometry", box 17.6 (G = 1.332, value from memory).</summary>
    [Fact]
    public void DriftCircuit_OneField_HasTheLikelihoodRatioTestOfTheTable()
    {
        DriftCircuit now = new([-1], [2]), then = new([-1], [2]);
        (now.Counts[0], now.Counts[1], then.Counts[0], then.Counts[1]) = (12, 22, 16, 50);
        FieldDrift drift = now.Against(then)[0];

        Assert.Equal(1.332, drift.G, 1e-3);
        Assert.Equal(1, drift.Freedom);
        Assert.InRange(drift.P, 0.24, 0.26);
    }

    private static Circuit FromCounts(DriftCircuit drift, int[] parents, int[] states)
    {
        CircuitBuilder builder = new([.. states.Select((s, v) => Variable.Category($"v{v}", Enumerable.Range(0, s).Select(x => $"{x}")))]);
        int[][] nodes = new int[states.Length][];
        int end = drift.Counts.Length;
        for (int v = states.Length - 1; v >= 0; v--)
        {
            int rows = parents[v] < 0 ? 1 : states[parents[v]];
            end -= rows * states[v];
            int[] values = [.. Enumerable.Range(0, states[v]).Select(x =>
            {
                double[] p = new double[states[v]];
                p[x] = 1;
                int leaf = builder.AddDiscrete(v, p);
                return v + 1 < states.Length ? builder.AddProduct([leaf, nodes[v + 1][x]]) : leaf;
            })];
            nodes[v] = [.. Enumerable.Range(0, rows).Select(r =>
            {
                double[] row = [.. drift.Counts.Skip(end + (r * states[v])).Take(states[v]).Select(c => (double)c)];
                return builder.AddSum(values, [.. row.Select(c => c / row.Sum())]);
            })];
        }

        return builder.Build(nodes[0][0]);
    }

    private static (ProfileParameters Fit, double LogLikelihood) Climb(ProfileShape shape, ProfileParameters start, TrainingTable table, int steps)
    {
        // Without pseudo-records each step is plain expectation maximisation.
        double[][] margins = [.. shape.Fields.Select(f => Enumerable.Repeat(1.0 / f.StateCount, f.StateCount).ToArray())];
        ProfilePrior prior = new(shape, 0, margins, null);
        ExpectationStep step = new(shape, start);
        int[] rows = [.. Enumerable.Range(0, table.Records)];
        for (int i = 0; i < steps; i++)
        {
            ProfileStatistics counts = new(shape);
            step.Add(table, rows, counts);
            step.Take(prior.Likeliest(counts));
        }

        return (step.Parameters, step.Add(table, rows, new ProfileStatistics(shape)));
    }

    private static TrainingTable Table(Variable[] groups, Variable? decision, Variable[] fields, ushort[][] labels, ushort[] decisions, ushort[][] values) =>
        new(groups, decision, fields, labels, decisions, values);

    private static void Check(ReferenceCase given, ushort[][] columns, int[] states, string[] names)
    {
        foreach (JsonProperty pair in given.Expected.GetProperty("mutual_information_nats").EnumerateObject())
        {
            string[] ends = pair.Name.Split('-');
            (int a, int b) = (Array.IndexOf(names, ends[0]), Array.IndexOf(names, ends[1]));
            Assert.Equal(pair.Value.GetDouble(), PairInformation.Of(columns[a], states[a], columns[b], states[b], out _), 1e-11);
        }
    }

    private static double[,] PlugIn(ushort[][] columns, int[] states)
    {
        double[,] information = new double[columns.Length, columns.Length];
        for (int a = 0; a < columns.Length; a++)
        {
            for (int b = 0; b < columns.Length; b++)
            {
                information[a, b] = a == b ? 0 : PairInformation.Of(columns[a], states[a], columns[b], states[b], out _);
            }
        }

        return information;
    }

    private static (ushort[][] Columns, int[] States) Coded(IEnumerable<string[]> columns)
    {
        List<ushort[]> coded = [];
        List<int> states = [];
        foreach (string[] column in columns)
        {
            string[] values = [.. column.Distinct().Order(StringComparer.Ordinal)];
            coded.Add([.. column.Select(c => (ushort)Array.IndexOf(values, c))]);
            states.Add(values.Length);
        }

        return ([.. coded], [.. states]);
    }
}
