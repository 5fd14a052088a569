namespace Evenhand.Statistics.Tests;

/// <summary>Asserts closeness as a share of the expected value, which xunit's own tolerance cannot say of tiny numbers.</summary>
internal static class Relative
{
    public static void Equal(double expected, double got, double tolerance) =>
        Assert.True(
            got == expected || Math.Abs(got - expected) <= tolerance * Math.Abs(expected),
            FormattableString.Invariant($"Got {got:R}, expected {expected:R} within {tolerance:R} relative."));
}
