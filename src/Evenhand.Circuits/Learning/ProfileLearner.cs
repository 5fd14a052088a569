using Evenhand.Circuits.Profiles;

namespace Evenhand.Circuits.Learning;

/// <summary>Learns a profile circuit: tree from mutual information, parameters by expectation maximisation with missing values.</summary>
/// <remarks>
/// <para>A. P. Dempster, N. M. Laird and D. B. Rubin, "Maximum Likelihood from Incomplete Data via the EM Algorithm", JRSS B 39 (1977);
/// mini-batches with decaying shares: O. Cappé and E. Moulines, "On-line expectation–maximization algorithm for latent data models", JRSS
/// B 71 (2009). The parameters kept are those with the best likelihood of held-out records, whichever step they come from.</para>
/// <para>The steps: (1) the tree; (2) a seeded start near the margins; (3) mini-batches while held-out records gain; (4) full batches
/// while they gain. Deterministic for a seed.</para>
/// </remarks>
public sealed class ProfileLearner
{
    private readonly TrainingTable _sample;
    private readonly TrainingTable _heldOut;
    private readonly LearningOptions _options;
    private readonly double[][] _margins;
    private readonly Action<double>? _progress;

    /// <summary>Prepares.</summary>
    /// <param name="sample">What is learned from.</param>
    /// <param name="heldOut">What steps are compared on; other records of the same population.</param>
    /// <param name="options">How.</param>
    /// <param name="progress">Told the share done, now and then; null for nobody.</param>
    public ProfileLearner(TrainingTable sample, TrainingTable heldOut, LearningOptions options, Action<double>? progress = null)
    {
        ArgumentNullException.ThrowIfNull(sample);
        ArgumentNullException.ThrowIfNull(heldOut);
        ArgumentNullException.ThrowIfNull(options);
        _sample = sample;
        _heldOut = heldOut;
        _options = options;
        _progress = progress;
        _margins = [.. sample.Fields.Select((f, i) => Margin(sample.Values[i], f.StateCount))];
    }

    /// <summary>Learns.</summary>
    /// <param name="parents">The tree; null to learn it too.</param>
    public LearnedProfile Learn(IReadOnlyList<int>? parents = null)
    {
        ProfileShape shape = new(_options.Profiles, _sample.Groups, _sample.Decision, _sample.Fields, parents ?? Tree(_sample));
        ProfilePrior prior = new(shape, _options.Pseudo, _margins, null);
        ProfileParameters parameters = prior.Likeliest(Start(shape));
        Search search = new(this, shape, parameters);
        search.MiniBatches();
        search.FullBatches();
        return new LearnedProfile(new ProfileCircuit(shape, search.Best), search.BestLikelihood);
    }

    /// <summary>The Chow–Liu tree of a sample's fields, rooted where fields tell most about groups and decision, else in the busiest field.</summary>
    public static int[] Tree(TrainingTable sample)
    {
        ArgumentNullException.ThrowIfNull(sample);
        int[] states = [.. sample.Fields.Select(f => f.StateCount)];
        int[] parents = ChowLiuTree.Parents(ChowLiuTree.Information(sample.Values, states), 0);
        int[] degree = new int[states.Length];
        for (int f = 0; f < parents.Length; f++)
        {
            if (parents[f] >= 0)
            {
                degree[f]++;
                degree[parents[f]]++;
            }
        }

        double[] tells = [.. sample.Values.Select((v, f) => Tells(sample, v, states[f]))];
        int root = Enumerable.Range(0, states.Length).MaxBy(f => (degree[f] > 1, tells[f], degree[f], -f));
        return ChowLiuTree.Reroot(parents, root);
    }

    /// <summary>The mean log-likelihood of a table's records in nats.</summary>
    public static double MeanLogLikelihood(ProfileCircuit circuit, TrainingTable table)
    {
        ArgumentNullException.ThrowIfNull(circuit);
        ArgumentNullException.ThrowIfNull(table);
        return new ExpectationStep(circuit.Shape, circuit.Parameters).MeanLogLikelihood(table);
    }

    private static double Tells(TrainingTable sample, ushort[] column, int states)
    {
        double sum = sample.Decision is null ? 0 : PairInformation.Corrected(column, states, sample.Decisions, sample.Decision.StateCount);
        for (int g = 0; g < sample.Groups.Count; g++)
        {
            sum += PairInformation.Corrected(column, states, sample.Labels[g], sample.Groups[g].StateCount);
        }

        return sum;
    }

    /// <summary>The share of each value among the known ones; half a record each beforehand.</summary>
    private static double[] Margin(ushort[] column, int states)
    {
        double[] margin = new double[states];
        Array.Fill(margin, 0.5);
        foreach (ushort code in column)
        {
            if (code < states)
            {
                margin[code]++;
            }
        }

        double sum = margin.Sum();
        return [.. margin.Select(m => m / sum)];
    }

    /// <summary>
    /// Counts to start from: each hidden state takes values near the margin and keeps to its parent's state more often than not, so that
    /// states mean the same along the tree from the beginning.
    /// </summary>
    private ProfileStatistics Start(ProfileShape shape)
    {
        Random random = new(_options.Seed);
        ProfileStatistics start = new(shape);
        int k = shape.Profiles;
        for (int f = 0; f < shape.Fields.Count; f++)
        {
            double[] e = start.Counts.Emissions[f], a = start.Counts.Transitions[f];
            for (int i = 0; i < e.Length; i++)
            {
                e[i] = 100 * _margins[f][i / k] * Math.Exp(1.5 * (random.NextDouble() - 0.5));
            }

            for (int i = 0; i < a.Length; i++)
            {
                a[i] = (i / k == i % k ? k : 1) * (0.5 + random.NextDouble());
            }
        }

        for (int i = 0; i < start.Counts.Weights.Length; i++)
        {
            start.Counts.Weights[i] = 10 * (0.5 + random.NextDouble());
        }

        Array.Fill(start.Counts.Patterns, 1);
        return start;
    }

    /// <summary>One search for parameters from one start.</summary>
    private sealed class Search
    {
        private readonly ProfileLearner _learner;
        private readonly ProfileShape _shape;
        private readonly ExpectationStep _step;

        public Search(ProfileLearner learner, ProfileShape shape, ProfileParameters start)
        {
            (_learner, _shape) = (learner, shape);
            _step = new ExpectationStep(shape, start);
            Best = start;
            BestLikelihood = _step.MeanLogLikelihood(learner._heldOut);
        }

        public ProfileParameters Best { get; private set; }

        public double BestLikelihood { get; private set; }

        public void MiniBatches()
        {
            LearningOptions options = _learner._options;
            TrainingTable sample = _learner._sample;
            Random random = new(options.Seed + 1);
            ProfileStatistics running = new(_shape), batch = new(_shape);
            int[] order = [.. Enumerable.Range(0, sample.Records)];
            int size = options.BatchRecords ?? Math.Clamp(sample.Records / 50, 256, 1024);
            int stale = 0;
            for (int pass = 0; pass < options.MostPasses && stale < options.Patience; pass++)
            {
                double at = options.MostPasses == 1 ? 0 : (double)pass / (options.MostPasses - 1);
                double share = options.Shares.First * Math.Pow(options.Shares.Last / options.Shares.First, at);
                random.Shuffle(order);
                foreach (int[] rows in order.Chunk(size))
                {
                    batch.Clear();
                    _step.Add(sample, rows, batch);
                    running.Blend(batch, share * rows.Length / size, sample.Records);
                    _step.Take(new ProfilePrior(_shape, options.Pseudo, _learner._margins, running).Likeliest(running));
                }

                stale = IsBetter() ? 0 : stale + 1;
                _learner._progress?.Invoke(0.8 * (pass + 1) / options.MostPasses);
            }
        }

        public void FullBatches()
        {
            LearningOptions options = _learner._options;
            ProfileStatistics all = new(_shape);
            ProfilePrior? prior = null;
            int[] rows = [.. Enumerable.Range(0, _learner._sample.Records)];
            _step.Take(Best);
            for (int step = 0; step < options.MostSteps; step++)
            {
                all.Clear();
                _step.Add(_learner._sample, rows, all);

                // The prior is held from the first step on: only then is each step sure to climb.
                prior ??= new ProfilePrior(_shape, options.Pseudo, _learner._margins, all);
                _step.Take(prior.Likeliest(all));
                double before = BestLikelihood;
                if (!IsBetter() || BestLikelihood - before < 1e-5)
                {
                    break;
                }
            }

            _learner._progress?.Invoke(1);
        }

        private bool IsBetter()
        {
            double likelihood = _step.MeanLogLikelihood(_learner._heldOut);
            if (!(likelihood > BestLikelihood))
            {
                return false;
            }

            (Best, BestLikelihood) = (_step.Parameters, likelihood);
            return true;
        }
    }
}
