using Evenhand.Circuits.Profiles;

namespace Evenhand.Circuits.Learning;

/// <summary>Expected counts of a sample under a profile circuit, and likelihoods: the E step of expectation maximisation.</summary>
internal sealed class ExpectationStep
{
    private const int BlockRecords = 256;

    private readonly ProfileShape _shape;
    private readonly ProfileEngine<double, DoubleArithmetic> _engine;
    private readonly ProfileBlock<double> _block;
    private readonly ProfileFlows<double> _flows;

    public ExpectationStep(ProfileShape shape, ProfileParameters parameters)
    {
        _shape = shape;
        _engine = new ProfileEngine<double, DoubleArithmetic>(shape, parameters);
        _block = _engine.NewBlock(BlockRecords);
        _flows = _engine.NewFlows();
        Parameters = parameters;
    }

    /// <summary>The parameters in force.</summary>
    public ProfileParameters Parameters { get; private set; }

    /// <summary>Takes other parameters.</summary>
    public void Take(ProfileParameters parameters)
    {
        Parameters = parameters;
        _engine.Set(parameters);
    }

    /// <summary>Adds the expected counts of some records; gives the sum of their log-likelihoods.</summary>
    public double Add(TrainingTable table, ReadOnlySpan<int> rows, ProfileStatistics into)
    {
        _flows.Clear();
        for (int from = 0; from < rows.Length; from += BlockRecords)
        {
            table.Fill(_block, _shape, rows.Slice(from, Math.Min(BlockRecords, rows.Length - from)));
            _engine.Up(_block);
            _engine.Down(_block, _flows);
        }

        into.Add(_flows, Parameters);
        return _flows.LogLikelihood;
    }

    /// <summary>The mean log-likelihood of a table's records in nats.</summary>
    public double MeanLogLikelihood(TrainingTable table)
    {
        double sum = 0;
        foreach (int[] rows in Enumerable.Range(0, table.Records).Chunk(BlockRecords))
        {
            table.Fill(_block, _shape, rows);
            _engine.Up(_block);
            for (int e = 0; e < rows.Length; e++)
            {
                sum += _block.LogLikelihood[e];
            }
        }

        return sum / table.Records;
    }
}
