using Evenhand.Circuits.Profiles;
using Xunit;

namespace Evenhand.Circuits.Tests.Profiles;

/// <summary>The dense steps against the textbook loops.</summary>
public sealed class LatentKernelTests
{
    [Theory]
    [InlineData(16, 8)]
    [InlineData(16, 64)]
    [InlineData(32, 24)]
    [InlineData(64, 16)]
    public void MultiplyAndAddOuter_AreTheTextbookSums(int k, int records)
    {
        Random random = new(k + records);
        double[] from = Numbers(random, records * k), rows = Numbers(random, k * k), into = new double[records * k], counts = Numbers(random, k * k);
        double[] before = [.. counts];
        LatentKernel<double, DoubleArithmetic>.Multiply(from, rows, into, records, k);
        LatentKernel<double, DoubleArithmetic>.AddOuter(from, into, counts, records - 3, k);

        for (int e = 0; e < records; e++)
        {
            for (int j = 0; j < k; j++)
            {
                Assert.Equal(Enumerable.Range(0, k).Sum(i => from[(e * k) + i] * rows[(i * k) + j]), into[(e * k) + j], 1e-12);
            }
        }

        for (int i = 0; i < k * k; i++)
        {
            double expected = before[i] + Enumerable.Range(0, records - 3).Sum(e => from[(e * k) + (i / k)] * into[(e * k) + (i % k)]);
            Assert.Equal(expected, counts[i], 1e-10);
        }
    }

    private static double[] Numbers(Random random, int count) => [.. Enumerable.Range(0, count).Select(_ => random.NextDouble())];
}
