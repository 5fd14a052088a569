using Evenhand.Monitoring.Charters.Yaml;

namespace Evenhand.Monitoring.Charters;

/// <summary>A limit of an alert rule: a number, a percentage or percentage points.</summary>
/// <param name="Value">The limit as a fraction: <c>20%</c> and <c>20pp</c> are 0.2.</param>
/// <param name="Unit">Empty, <c>%</c> or <c>pp</c>.</param>
internal sealed record LimitValue(double Value, string Unit)
{
    private const string Mend = "write a number such as 0.8, a percentage such as 20%, or percentage points such as 5pp";

    /// <summary>Reads a limit, or null.</summary>
    public static LimitValue? Read(KeyedNode? node)
    {
        string? text = node?.Text(Mend);
        if (text is null)
        {
            return null;
        }

        string unit = text.EndsWith('%') ? "%" : text.EndsWith("pp", StringComparison.Ordinal) ? "pp" : "";
        if (!NumberValue.TryParse(text[..^unit.Length].TrimEnd(' '), out double number))
        {
            node!.Report($"{QuotedText.Of(text)} is no limit", Mend);
            return null;
        }

        return new(unit.Length == 0 ? number : number / 100, unit);
    }
}
