using Evenhand.Daemon.Sources;
using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Population;
using Evenhand.Monitoring.Records;

namespace Evenhand.Daemon.Learning;

/// <summary>Reads training samples from files.</summary>
internal static class SampleReader
{
    /// <summary>Reads some inputs as one sample.</summary>
    /// <param name="charter">The charter.</param>
    /// <param name="inputs">Files, or <c>-</c>.</param>
    /// <param name="progress">Told the name and share read of the file at hand; null for nobody.</param>
    public static PopulationSample Read(Charter charter, IReadOnlyList<string> inputs, Action<string, double>? progress)
    {
        RecordLayout layout = new(charter, collectNumbers: true);
        PopulationSample sample = new(charter, layout);

        // One record at a time: the numbers behind the bands are those of the record read last.
        RecordBatch batch = new(layout, 1);
        layout.Numbers!.Reset();
        foreach (string input in inputs)
        {
            using RecordFile file = RecordFile.Open(input, charter, layout, new IdHasher(new byte[IdHasher.KeyLength]), RecordKind.Decision);
            bool more = true;
            while (more)
            {
                batch.Clear();
                more = file.Fill(batch);
                sample.Add(batch);
                if (file.Position % 4096 == 0)
                {
                    progress?.Invoke(file.Name, file.Length is > 0 ? (double)file.BytesRead / file.Length.Value : 0);
                }
            }
        }

        return sample;
    }
}
