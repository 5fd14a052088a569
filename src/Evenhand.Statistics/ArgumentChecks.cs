using System.Runtime.CompilerServices;

namespace Evenhand.Statistics;

/// <summary>Preconditions the procedures share; each failure names the parameter.</summary>
internal static class ArgumentChecks
{
    /// <summary>Throws unless the level is strictly between 0 and 1.</summary>
    public static void Level(double level, [CallerArgumentExpression(nameof(level))] string? name = null)
    {
        if (!(level > 0 && level < 1))
        {
            throw new ArgumentOutOfRangeException(name, level, "A confidence level lies strictly between 0 and 1, such as 0.95.");
        }
    }

    /// <summary>Throws if the count is negative.</summary>
    public static void Count(long count, [CallerArgumentExpression(nameof(count))] string? name = null)
    {
        if (count < 0)
        {
            throw new ArgumentOutOfRangeException(name, count, "A count cannot be negative.");
        }
    }

    /// <summary>Throws unless 0 ≤ successes ≤ n.</summary>
    public static void Successes(
        long successes,
        long n,
        [CallerArgumentExpression(nameof(successes))] string? successesName = null,
        [CallerArgumentExpression(nameof(n))] string? nName = null)
    {
        Count(n, nName);
        Count(successes, successesName);
        if (successes > n)
        {
            throw new ArgumentOutOfRangeException(successesName, successes, $"There cannot be more successes than the {n} trials in '{nName}'.");
        }
    }

    /// <summary>Throws if the number is zero or negative; NaN passes.</summary>
    public static void Positive(double number, [CallerArgumentExpression(nameof(number))] string? name = null)
    {
        if (number <= 0)
        {
            throw new ArgumentOutOfRangeException(name, number, "The number must be positive.");
        }
    }

    /// <summary>Throws unless the probability is in [0, 1] or NaN.</summary>
    public static void Probability(double p, [CallerArgumentExpression(nameof(p))] string? name = null)
    {
        if (p < 0 || p > 1)
        {
            throw new ArgumentOutOfRangeException(name, p, "A probability lies between 0 and 1.");
        }
    }
}
