using System.Reflection;
using Dapper;
using DbUp;
using DbUp.Engine;
using DbUp.Engine.Output;
using DbUp.Sqlite.Helpers;
using Microsoft.Data.Sqlite;

namespace Evenhand.Daemon.Stores.Sqlite;

/// <summary>Brings a database up to this version's tables, by numbered scripts that are never changed once released.</summary>
internal static class SqliteSchema
{
    private const string Journal = "schema_version";
    private const string Prefix = "sqlite/";

    /// <summary>Runs the scripts that have not run yet, all in one transaction.</summary>
    public static void Upgrade(SqliteConnection connection, string file)
    {
        RefuseNewer(connection, file);
        using SharedConnection shared = new(connection);
        UpgradeEngine engine = DeployChanges.To.SqliteDatabase(shared)
            .WithScriptsEmbeddedInAssembly(Assembly.GetExecutingAssembly(), name => name.StartsWith(Prefix, StringComparison.Ordinal))
            .WithTransaction()
            .WithVariablesDisabled()
            .JournalToSqliteTable(Journal)
            .LogTo(new NoOpUpgradeLog())
            .Build();
        DatabaseUpgradeResult result = engine.PerformUpgrade();
        if (!result.Successful)
        {
            throw result.Error is SqliteException e
                ? SqliteFaults.Translate(file, e)
                : new StoreException($"store sqlite:{file}: the upgrade at {result.ErrorScript?.Name} failed and was taken back ({result.Error.Message})", result.Error);
        }
    }

    /// <summary>Refuses a database that is not this program's, or that a later version has written.</summary>
    public static void RefuseNewer(SqliteConnection connection, string file)
    {
        string[] tables = [.. connection.Query<string>("SELECT name FROM sqlite_master WHERE type = 'table' AND name NOT LIKE 'sqlite_%'")];
        if (tables.Length == 0)
        {
            return;
        }

        if (!tables.Contains(Journal))
        {
            throw new StoreException($"store sqlite:{file}: a database of another program; name another file");
        }

        string[] known = [.. Assembly.GetExecutingAssembly().GetManifestResourceNames()];
        string? unknown = connection.Query<string>($"SELECT ScriptName FROM {Journal}").FirstOrDefault(s => !known.Contains(s));
        if (unknown is not null)
        {
            throw new StoreException($"store sqlite:{file}: written by a later version ({unknown[Prefix.Length..]}); use that version or a later one");
        }
    }
}
