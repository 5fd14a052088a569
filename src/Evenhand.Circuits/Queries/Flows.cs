using Evenhand.Circuits.Structure;

namespace Evenhand.Circuits.Queries;

/// <summary>The probability that each node takes part in a completion: its derivative times its value, over the whole.</summary>
internal static class Flows
{
    /// <summary>The flow of each node of a distribution with nothing known.</summary>
    public static double[] Of(Circuit circuit)
    {
        Scaled[] values = CircuitFold.Up<Scaled, SumProduct>(circuit, new SumProduct(Factors.None(circuit)));
        Scaled[] derivatives = CircuitFold.Down(circuit, values);
        double[] flows = new double[circuit.NodeCount];
        for (int node = 0; node < flows.Length; node++)
        {
            flows[node] = (derivatives[node] * values[node] / values[circuit.Root]).ToDouble();
        }

        return flows;
    }
}
