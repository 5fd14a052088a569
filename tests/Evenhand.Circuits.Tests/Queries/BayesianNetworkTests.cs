using System.Text.Json;
using Evenhand.Circuits.Queries;
using Evenhand.Circuits.Structure;
using Evenhand.Testing;
using Xunit;

namespace Evenhand.Circuits.Tests.Queries;

/// <summary>The chest-clinic network of Lauritzen and Spiegelhalter (JRSS B 50, 1988) and the sprinkler network (Pearl 1988), every value of the reference cases.</summary>
public sealed class BayesianNetworkTests
{
    public static TheoryData<string> Cases => [.. ReferenceCases.Load("bayes_net").Select(c => c.Id)];

    [Theory]
    [MemberData(nameof(Cases))]
    public void Case_EveryValue_IsTheNetworks(string id)
    {
        ReferenceCase given = ReferenceCases.Load("bayes_net").Single(c => c.Id == id);
        Circuit circuit = BayesianNetwork.Compile(given.Input.GetProperty("network_file").GetString()!);
        Factors evidence = given.Input.TryGetProperty("evidence", out JsonElement known) ? Known(circuit, Factors.None(circuit), known) : Factors.None(circuit);
        int compared = 0;
        void near(double expected, double actual)
        {
            Assert.Equal(expected, actual, given.Tolerance.Absolute);
            compared++;
        }

        Assert.True(circuit.IsDeterministic);
        double[]?[] posteriors = CircuitQueries.Posteriors(circuit, evidence);
        foreach (string key in (string[])["marginals_yes", "posterior_yes"])
        {
            foreach (JsonProperty p in given.TryExpected(key, out JsonElement values) ? values.EnumerateObject() : default)
            {
                int v = circuit.IndexOf(p.Name);
                near(p.Value.GetDouble(), posteriors[v]![circuit.Variables[v].StateOf("yes")]);
            }
        }

        if (given.TryExpected("p_evidence", out JsonElement whole))
        {
            near(whole.GetDouble(), CircuitQueries.Probability(circuit, evidence).ToDouble());
        }

        if (given.TryExpected("entropy_nats", out JsonElement entropy))
        {
            near(entropy.GetDouble(), Entropy.OfAll(circuit));
        }

        if (given.TryExpected("mpe", out JsonElement mpe))
        {
            (double[] answers, double log) = CircuitQueries.MostLikely(circuit, evidence);
            Assert.All(mpe.EnumerateObject(), p => Assert.Equal(p.Value.GetString(), circuit.Variables[circuit.IndexOf(p.Name)].Values[(int)answers[circuit.IndexOf(p.Name)]]));
            near(given.Expected.GetProperty("mpe_probability_given_evidence").GetDouble(), Math.Exp(log - CircuitQueries.Probability(circuit, evidence).Log));
        }

        if (given.Input.TryGetProperty("queries", out JsonElement queries) && given.TryExpected("p", out JsonElement answersOf))
        {
            foreach ((JsonElement query, JsonElement p) in queries.EnumerateArray().Zip(answersOf.EnumerateArray()))
            {
                Factors under = Known(circuit, Factors.None(circuit), query.GetProperty("evidence"));
                near(p.GetDouble(), CircuitQueries.Conditional(circuit, Known(circuit, under, query.GetProperty("event")), under));
            }
        }

        if (id == "bn-sprinkler")
        {
            compared += Sprinkler(circuit, given);
        }

        Assert.True(compared > 1);
    }

    private static int Sprinkler(Circuit circuit, ReferenceCase given)
    {
        int of(char initial) => circuit.Variables.ToList().FindIndex(v => v.Name.StartsWith(initial.ToString(), StringComparison.OrdinalIgnoreCase));
        Factors add(Factors factors, char initial, bool isTrue) =>
            factors.With(of(initial), Factor.OfStates(circuit.Variables[of(initial)].Values.Select(v => (v is "true" or "yes" or "T" or "1") == isTrue ? 1.0 : 0)));
        Factors none = Factors.None(circuit);
        Dictionary<string, (Factors Asked, Factors Given)> queries = new()
        {
            ["p_W"] = (add(none, 'w', true), none),
            ["p_S_given_W"] = (add(add(none, 'w', true), 's', true), add(none, 'w', true)),
            ["p_R_given_W"] = (add(add(none, 'w', true), 'r', true), add(none, 'w', true)),
            ["p_S_given_WR"] = (add(add(add(none, 'w', true), 'r', true), 's', true), add(add(none, 'w', true), 'r', true)),
            ["p_C_given_W"] = (add(add(none, 'w', true), 'c', true), add(none, 'w', true)),
            ["p_R_given_not_W"] = (add(add(none, 'w', false), 'r', true), add(none, 'w', false)),
            ["p_S_given_W_not_R"] = (add(add(add(none, 'w', true), 'r', false), 's', true), add(add(none, 'w', true), 'r', false)),
            ["p_W_given_S"] = (add(add(none, 's', true), 'w', true), add(none, 's', true)),
            ["p_C_given_SR"] = (add(add(add(none, 's', true), 'r', true), 'c', true), add(add(none, 's', true), 'r', true)),
        };
        foreach ((string key, (Factors asked, Factors under)) in queries)
        {
            Assert.Equal(given.Expected.GetProperty(key).GetDouble(), CircuitQueries.Conditional(circuit, asked, under), given.Tolerance.Absolute);
        }

        return queries.Count;
    }

    private static Factors Known(Circuit circuit, Factors factors, JsonElement evidence)
    {
        foreach (JsonProperty p in evidence.EnumerateObject())
        {
            factors = EvidenceText.Add($"{p.Name}={p.Value.GetString()}", circuit, factors);
        }

        return factors;
    }
}
