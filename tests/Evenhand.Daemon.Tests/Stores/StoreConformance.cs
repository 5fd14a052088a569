using Evenhand.Daemon.Stores;

namespace Evenhand.Daemon.Tests.Stores;

/// <summary>What every test of a store needs: a place of its own.</summary>
public abstract class StoreConformance : IDisposable
{
    private readonly IStorePlace _place;

    private protected StoreConformance(IStorePlace place) => _place = place;

    /// <inheritdoc cref="IStorePlace.Open"/>
    private protected IStore Open() => _place.Open();

    /// <inheritdoc cref="IStorePlace.OpenReadOnly"/>
    private protected IEvidenceStore OpenReadOnly() => _place.OpenReadOnly();

    /// <inheritdoc cref="IStorePlace.Execute"/>
    private protected void Execute(string sql) => _place.Execute(sql);

    public void Dispose()
    {
        _place.Dispose();
        GC.SuppressFinalize(this);
    }
}
