using System.Globalization;
using System.Text;
using Parquet;
using Parquet.Schema;

namespace Evenhand.Daemon.Sources;

/// <summary>Reads a column of a row group as the texts that JSON would have; null where there is no value.</summary>
internal static class ParquetColumn
{
    /// <summary>The texts of a column, one a row.</summary>
    /// <exception cref="InvalidDataException">The column is a list, or of a type that has no plain text.</exception>
    public static string?[] Read(ParquetRowGroupReader group, DataField field)
    {
        int rows = (int)group.RowCount;
        if (field.MaxRepetitionLevel > 0)
        {
            throw new InvalidDataException($"column {field.Name} is a list");
        }

        // The library's schema gives texts and bytes as memory of characters and bytes.
        if (field.ClrType == typeof(ReadOnlyMemory<char>))
        {
            return Strings(group, field, rows);
        }

        return Type.GetTypeCode(field.ClrType) switch
        {
            TypeCode.Boolean => Values<bool>(group, field, rows, b => b ? "true" : "false"),
            TypeCode.SByte => Numbers<sbyte>(group, field, rows),
            TypeCode.Byte => Numbers<byte>(group, field, rows),
            TypeCode.Int16 => Numbers<short>(group, field, rows),
            TypeCode.UInt16 => Numbers<ushort>(group, field, rows),
            TypeCode.Int32 => Numbers<int>(group, field, rows),
            TypeCode.UInt32 => Numbers<uint>(group, field, rows),
            TypeCode.Int64 => Numbers<long>(group, field, rows),
            TypeCode.UInt64 => Numbers<ulong>(group, field, rows),
            TypeCode.Single => Numbers<float>(group, field, rows),
            TypeCode.Double => Numbers<double>(group, field, rows),
            TypeCode.Decimal => Numbers<decimal>(group, field, rows),
            TypeCode.DateTime => Values<DateTime>(group, field, rows, Moment),
            TypeCode.String => Strings(group, field, rows),
            _ => Others(group, field, rows),
        };
    }

    private static string?[] Others(ParquetRowGroupReader group, DataField field, int rows)
    {
        if (field.ClrType == typeof(byte[]) || field.ClrType == typeof(ReadOnlyMemory<byte>))
        {
            byte[]?[] bytes = new byte[]?[rows];
            group.ReadAsync(field, bytes.AsMemory()!).AsTask().GetAwaiter().GetResult();
            return Array.ConvertAll(bytes, b => b is null ? null : Encoding.UTF8.GetString(b));
        }

        return field.ClrType == typeof(DateOnly) ? Values<DateOnly>(group, field, rows, d => d.ToString("yyyy-MM-dd", CultureInfo.InvariantCulture))
            : field.ClrType == typeof(Guid) ? Values<Guid>(group, field, rows, g => g.ToString())
            : field.ClrType == typeof(TimeOnly) ? Values<TimeOnly>(group, field, rows, t => t.ToString("HH:mm:ss.FFFFFFF", CultureInfo.InvariantCulture))
            : throw new InvalidDataException($"column {field.Name} is of type {field.ClrType.Name}");
    }

    private static string?[] Strings(ParquetRowGroupReader group, DataField field, int rows)
    {
        string?[] strings = new string?[rows];
        group.ReadAsync(field, strings.AsMemory()!).AsTask().GetAwaiter().GetResult();
        return strings;
    }

    private static string?[] Numbers<T>(ParquetRowGroupReader group, DataField field, int rows)
        where T : struct, IFormattable => Values<T>(group, field, rows, n => n.ToString(null, CultureInfo.InvariantCulture));

    private static string?[] Values<T>(ParquetRowGroupReader group, DataField field, int rows, Func<T, string> text)
        where T : struct
    {
        if (!field.IsNullable)
        {
            T[] values = new T[rows];
            group.ReadAsync(field, values.AsMemory()).AsTask().GetAwaiter().GetResult();
            return Array.ConvertAll(values, v => (string?)text(v));
        }

        T?[] nullable = new T?[rows];
        group.ReadAsync(field, nullable.AsMemory()).AsTask().GetAwaiter().GetResult();
        return Array.ConvertAll(nullable, v => v is null ? null : text(v.Value));
    }

    private static string Moment(DateTime time)
    {
        // Parquet keeps instants; a time that is not marked as local is one in UTC.
        DateTime utc = time.Kind == DateTimeKind.Local ? time.ToUniversalTime() : time;
        return utc.ToString("yyyy-MM-dd'T'HH:mm:ss.FFFFFFF'Z'", CultureInfo.InvariantCulture);
    }
}
