using Evenhand.Daemon.Stores;

namespace Evenhand.Daemon.Tests.Stores;

/// <summary>An empty place of one kind of store, for one test; disposing clears it away.</summary>
internal interface IStorePlace : IDisposable
{
    /// <summary>Opens the store there for writing.</summary>
    IStore Open();

    /// <summary>Opens the store there for reading.</summary>
    IEvidenceStore OpenReadOnly();

    /// <summary>Runs a statement on the store's tables past the program, as somebody with a database tool would.</summary>
    /// <exception cref="System.Data.Common.DbException">The store refuses it.</exception>
    void Execute(string sql);
}
