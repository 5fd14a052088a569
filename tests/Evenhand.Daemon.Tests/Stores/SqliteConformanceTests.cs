namespace Evenhand.Daemon.Tests.Stores;

/// <summary>The SQLite store keeps the promises on runs and commits.</summary>
public sealed class SqliteRunTests : RunConformance
{
    public SqliteRunTests()
        : base(new SqlitePlace())
    {
    }
}

/// <summary>The SQLite store keeps the promises on the chain.</summary>
public sealed class SqliteChainTests : ChainConformance
{
    public SqliteChainTests()
        : base(new SqlitePlace())
    {
    }
}
