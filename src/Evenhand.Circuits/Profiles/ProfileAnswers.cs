namespace Evenhand.Circuits.Profiles;

/// <summary>Exact answers about single records under a profile circuit: cells as if labels were hidden, and how likely labels are known.</summary>
/// <remarks>Not thread-safe; reuses its room.</remarks>
public sealed class ProfileAnswers
{
    private readonly ProfileShape _shape;
    private readonly ProfileParameters _parameters;
    private readonly ProfileEngine<double, DoubleArithmetic> _engine;
    private readonly ProfileBlock<double> _block;
    private readonly double[] _cells;
    private readonly double[] _profiles;

    /// <summary>Prepares for one circuit.</summary>
    public ProfileAnswers(ProfileCircuit circuit)
    {
        ArgumentNullException.ThrowIfNull(circuit);
        _shape = circuit.Shape;
        _parameters = circuit.Parameters;
        _engine = new ProfileEngine<double, DoubleArithmetic>(_shape, _parameters);
        _block = _engine.NewBlock(1);
        _cells = new double[_shape.CellCount];
        _profiles = new double[_shape.Profiles];
    }

    /// <summary>Takes a record's input fields.</summary>
    /// <param name="codes">The code of each field; its number of states where it is missing.</param>
    public void Take(ReadOnlySpan<ushort> codes)
    {
        _block.Count = 1;
        for (int f = 0; f < codes.Length; f++)
        {
            _block.Codes[f][0] = codes[f];
        }

        _block.Evidence[0] = _shape.EvidenceCount - 1;
        _engine.Up(_block);
        double sum = 0;
        for (int cell = 0; cell < _cells.Length; cell++)
        {
            double own = 0;
            for (int z = 0; z < _profiles.Length; z++)
            {
                own += _parameters.Weights[(cell * _profiles.Length) + z] * _block.Up[_shape.Root][z];
            }

            _cells[cell] = _parameters.Cells[cell] * own;
            sum += _cells[cell];
        }

        for (int cell = 0; cell < _cells.Length; cell++)
        {
            _cells[cell] /= sum;
        }
    }

    /// <summary>P(cell | inputs), whatever labels are known; cells as <see cref="ProfileShape.CellOf"/> numbers them.</summary>
    public ReadOnlySpan<double> Cells => _cells;

    /// <summary>P(decision | inputs).</summary>
    public double Decision(int decision)
    {
        double sum = 0;
        for (int cell = decision; cell < _cells.Length; cell += _shape.Decisions)
        {
            sum += _cells[cell];
        }

        return sum;
    }

    /// <summary>P(label | inputs, decision), as if every label were hidden.</summary>
    public double Label(int group, int code, int decision)
    {
        double sum = 0, whole = 0;
        for (int cell = decision; cell < _cells.Length; cell += _shape.Decisions)
        {
            whole += _cells[cell];
            sum += _shape.CellOf(cell).Groups[group] == code ? _cells[cell] : 0;
        }

        return sum / whole;
    }

    /// <summary>P(the labels of some groups are known | inputs, decision).</summary>
    /// <param name="groups">Bit g for group g.</param>
    /// <param name="decision">The decision.</param>
    public double Known(int groups, int decision)
    {
        int k = _profiles.Length, patterns = _shape.PatternCount;
        double sum = 0, whole = 0;
        for (int z = 0; z < k; z++)
        {
            double profile = 0;
            for (int cell = decision; cell < _cells.Length; cell += _shape.Decisions)
            {
                profile += _parameters.Cells[cell] * _parameters.Weights[(cell * k) + z];
            }

            profile *= _block.Up[_shape.Root][z];
            whole += profile;
            for (int pattern = 0; pattern < patterns; pattern++)
            {
                sum += (pattern & groups) == groups ? profile * _parameters.Patterns[(((decision * k) + z) * patterns) + pattern] : 0;
            }
        }

        return sum / whole;
    }
}
