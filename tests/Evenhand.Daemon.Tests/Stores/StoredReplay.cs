using System.Globalization;
using System.Text;
using Evenhand.Daemon.Commands;
using Evenhand.Daemon.Replay;
using Evenhand.Daemon.Stores;
using Evenhand.Daemon.Tests.Replay;
using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Snapshots;

namespace Evenhand.Daemon.Tests.Stores;

/// <summary>One replay of a small stream into a store, in the test's process; it can be stopped on its way.</summary>
internal sealed class StoredReplay : IDisposable
{
    /// <summary>How many records the stream has; one in a hundred is rejected.</summary>
    public const int Records = 3000;

    private const int CommitEvery = 250;

    private readonly WorkFolder _folder = new();

    public StoredReplay()
    {
        Charter = _folder.Write("grants.yaml", HarbourTown.Charter);
        StringBuilder lines = new();
        for (int i = 0; i < Records; i++)
        {
            string language = i % 3 == 0 ? "river" : i % 3 == 1 ? "hill" : "coast";
            lines.Append(HarbourTown.Record(HarbourTown.CaseOf(i), i, language, i % 100 == 0 ? "lost" : i % 7 < 3 ? "fast_track" : "manual_review"));
        }

        Input = _folder.Write("grants.ndjson", lines.ToString());
    }

    /// <summary>The charter's file.</summary>
    public string Charter { get; }

    /// <summary>The stream's file.</summary>
    public string Input { get; }

    /// <summary>What the program has to be told to run the same replay.</summary>
    public IEnumerable<string> Arguments(string store) =>
        [Charter, Input, "--store", store, "--batch-size", "50", "--commit-every", CommitEvery.ToString(CultureInfo.InvariantCulture)];

    /// <summary>The snapshot of an undisturbed run without a store.</summary>
    public SealedSnapshot Undisturbed() => NewRun().RunAlone().Snapshot;

    /// <summary>Runs it into a store.</summary>
    public ReplayResult Into(IStore store) => NewRun().RunIn(store);

    /// <summary>Runs it into a store and stops after some commits.</summary>
    public void StopAfter(IStore store, int commits) =>
        Assert.Equal("stopped here", Assert.Throws<StoreException>(() => Into(new InterruptedStore(store, commits))).Message);

    public void Dispose() => _folder.Dispose();

    private ReplayRun NewRun() => new(
        CharterFile.Load(Charter, CharterUse.Monitoring),
        new ReplayRequest { Charter = Charter, Inputs = [Input], BatchSize = 50, CommitEvery = CommitEvery },
        TimeProvider.System,
        progress: null);
}
