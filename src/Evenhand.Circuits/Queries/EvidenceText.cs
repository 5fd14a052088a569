using System.Globalization;
using Evenhand.Circuits.Structure;

namespace Evenhand.Circuits.Queries;

/// <summary>Reads evidence as people write it: <c>name=value</c>, <c>name=a|b</c> (one of), <c>name=lo..hi</c> (half-open, either end may be empty).</summary>
public static class EvidenceText
{
    /// <summary>Adds evidence to what there is; several pieces about one variable hold together.</summary>
    /// <param name="text">The text.</param>
    /// <param name="circuit">The circuit.</param>
    /// <param name="evidence">What there is.</param>
    /// <exception cref="CircuitException">Not evidence about this circuit; the message says what is wrong and how to mend it.</exception>
    public static Factors Add(string text, Circuit circuit, Factors evidence)
    {
        ArgumentNullException.ThrowIfNull(text);
        ArgumentNullException.ThrowIfNull(evidence);
        int equals = text.IndexOf('=', StringComparison.Ordinal);
        if (equals <= 0)
        {
            throw new CircuitException($"{text}: is no evidence; write name=value, name=a|b or name=lo..hi");
        }

        int variable = VariableOf(text[..equals], circuit);
        Variable of = circuit.Variables[variable];
        string value = text[(equals + 1)..];
        return evidence.With(variable, of.IsContinuous ? Continuous(text, value) : OfStates(text, of, value));
    }

    /// <summary>The index of a variable that has a leaf.</summary>
    /// <exception cref="CircuitException">There is none of that name.</exception>
    public static int VariableOf(string name, Circuit circuit)
    {
        ArgumentNullException.ThrowIfNull(circuit);
        int variable = circuit.IndexOf(name);
        if (variable < 0 || !circuit.Has(variable))
        {
            string[] names = [.. circuit.Variables.Where((_, v) => circuit.Has(v)).Select(v => v.Name)];
            string list = names.Length <= 20 ? string.Join(", ", names) : $"{string.Join(", ", names.Take(20))} and {names.Length - 20} more";
            throw new CircuitException($"{name} is no variable of the circuit; its variables are {list}");
        }

        return variable;
    }

    private static Factor OfStates(string text, Variable of, string value)
    {
        double[] weights = new double[of.StateCount];
        string[] choices = of.StateOf(value) >= 0 ? [value] : value.Split('|');
        foreach (string choice in choices)
        {
            if (of.StateOf(choice) >= 0)
            {
                weights[of.StateOf(choice)] = 1;
            }
            else if (of.Kind == VariableKind.Number)
            {
                AddBins(text, of, choice, weights);
            }
            else
            {
                throw new CircuitException($"{text}: {choice} is no value of {of.Name}; its values are {string.Join(", ", of.Values.Take(20))}{(of.StateCount > 20 ? ", …" : "")}");
            }
        }

        return Factor.OfStates(weights);
    }

    private static void AddBins(string text, Variable of, string choice, double[] weights)
    {
        if (!choice.Contains("..", StringComparison.Ordinal))
        {
            int bin = of.BinOf(Number(text, choice));
            weights[bin >= 0 ? bin : throw new CircuitException($"{text}: {choice} is in no bin of {of.Name}; the bins are {string.Join(", ", of.Values)}")] = 1;
            return;
        }

        (double low, double high) = Interval(text, choice, of.Edges[0], of.Edges[^1]);
        int first = IndexOf(of, low), last = IndexOf(of, high);
        if (first < 0 || last < 0)
        {
            string edges = string.Join(", ", of.Edges.Where(double.IsFinite).Select(e => e.ToString("R", CultureInfo.InvariantCulture)));
            throw new CircuitException($"{text}: an interval of {of.Name} begins and ends on its edges, which are {edges}; leave an end empty for an open one");
        }

        for (int bin = first; bin < last; bin++)
        {
            weights[bin] = 1;
        }
    }

    private static int IndexOf(Variable of, double edge)
    {
        for (int i = 0; i < of.Edges.Count; i++)
        {
            if (of.Edges[i].Equals(edge))
            {
                return i;
            }
        }

        return -1;
    }

    private static Factor Continuous(string text, string value)
    {
        if (!value.Contains("..", StringComparison.Ordinal))
        {
            return Factor.At(Number(text, value));
        }

        (double low, double high) = Interval(text, value, double.NegativeInfinity, double.PositiveInfinity);
        return Factor.Between(low, high);
    }

    private static (double Low, double High) Interval(string text, string interval, double lowest, double highest)
    {
        int dots = interval.IndexOf("..", StringComparison.Ordinal);
        string from = interval[..dots], to = interval[(dots + 2)..];
        double low = from.Length == 0 ? lowest : Number(text, from), high = to.Length == 0 ? highest : Number(text, to);
        return low < high
            ? (low, high)
            : throw new CircuitException($"{text}: the interval is empty; write the lower end first");
    }

    private static double Number(string text, string number) =>
        double.TryParse(number, NumberStyles.Float, CultureInfo.InvariantCulture, out double value) && double.IsFinite(value)
            ? value
            : throw new CircuitException($"{text}: {(number.Length == 0 ? "an empty text" : number)} is no number; write one such as 42 or an interval such as 18..30");
}
