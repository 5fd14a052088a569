using System.Text;
using Evenhand.Monitoring.Records;
using Parquet;
using Parquet.Schema;

namespace Evenhand.Daemon.Sources;

/// <summary>Parquet with flat columns of primitive types, read one row group at a time.</summary>
/// <remarks>
/// Cells become the texts that JSON would have: <c>true</c>, shortest numbers, times by RFC 3339 in UTC. A compressed file is
/// unpacked to a temporary one first, since Parquet is read from its end.
/// </remarks>
internal sealed class ParquetFile : RecordFile
{
    private readonly RawInput _raw;
    private readonly FileStream _file;
    private readonly RowDecoder _decoder;
    private readonly ParquetReader _reader;
    private readonly DataField[] _fields;
    private readonly string?[][] _columns;
    private int _group;
    private int _row;
    private int _rows;
    private byte[] _cell = new byte[1024];

    public ParquetFile(RawInput raw, Stream? unpacked, string path, Decoding decoding, string name)
    {
        _raw = raw;
        _decoder = new RowDecoder(decoding.Charter, decoding.Layout, decoding.Hasher, decoding.Kind);
        if (path == "-")
        {
            throw new SourceException($"{name}: Parquet cannot be read from a pipe; name a file");
        }

        _file = unpacked is null ? RawInput.OpenFile(path, name) : Unpack(unpacked, name);
        try
        {
            raw.Drain();
            _reader = Guard(name, () => ParquetReader.CreateAsync(_file).GetAwaiter().GetResult());
            _fields = Guard(name, () => _reader.Schema.GetDataFields());
            _columns = new string?[_fields.Length][];
            ColumnBinding.Bind(_decoder, [.. _fields.Select(f => f.Path.ToString())], name);
        }
        catch
        {
            _file.Dispose();
            throw;
        }
    }

    public override long? Length => _raw.Limit;

    public override long BytesRead => _reader.RowGroupCount == 0 ? 0 : _raw.BytesRead * _group / _reader.RowGroupCount;

    public override long DefaultTime
    {
        get => _decoder.DefaultTime;
        set => _decoder.DefaultTime = value;
    }

    public override string Sha256 => _raw.Sha256;

    public override string PlaceOf(long position) => FormattableString.Invariant($" row {position + 1}");

    public override bool Fill(RecordBatch batch)
    {
        while (!batch.IsFull)
        {
            if (!Next())
            {
                return false;
            }

            _decoder.Begin();
            foreach (int column in _decoder.Columns)
            {
                if (_columns[column][_row - 1] is { } value)
                {
                    _decoder.Set(column, Utf8(value));
                }
            }

            _decoder.End(batch, Position);
            Position++;
        }

        return true;
    }

    public override void Skip(long entries)
    {
        for (long i = 0; i < entries; i++, Position++)
        {
            if (!Next())
            {
                throw new SourceException($"{Name}: has fewer rows than the unfinished run had read; it was changed since");
            }
        }
    }

    protected override void Dispose(bool disposing)
    {
        if (disposing)
        {
            _reader.DisposeAsync().AsTask().GetAwaiter().GetResult();
            _file.Dispose();
            _raw.Dispose();
        }
    }

    private static FileStream Unpack(Stream unpacked, string name)
    {
        FileStream file = new(Path.GetTempFileName(), FileMode.Create, FileAccess.ReadWrite, FileShare.None, 1 << 16, FileOptions.DeleteOnClose);
        byte[] buffer = new byte[1 << 16];
        int read;
        while ((read = ContentReader.Read(unpacked, buffer, name)) > 0)
        {
            file.Write(buffer, 0, read);
        }

        file.Position = 0;
        return file;
    }

    private static T Guard<T>(string name, Func<T> read)
    {
        try
        {
            return read();
        }
        catch (Exception e) when (e is not OutOfMemoryException)
        {
            // The library throws whatever its parser stumbles over in damaged bytes.
            throw new SourceException($"{name}: is damaged, cut, or no Parquet file ({e.Message.Split('\n')[0].TrimEnd('.')}); get the file anew", e);
        }
    }

    private bool Next()
    {
        while (_row >= _rows)
        {
            if (_group >= _reader.RowGroupCount)
            {
                return false;
            }

            Guard(Name, ReadGroup);
        }

        _row++;
        return true;
    }

    private bool ReadGroup()
    {
        using ParquetRowGroupReader group = _reader.OpenRowGroupReader(_group++);
        _rows = (int)group.RowCount;
        _row = 0;
        foreach (int column in _decoder.Columns)
        {
            _columns[column] = ParquetColumn.Read(group, _fields[column]);
        }

        return true;
    }

    private ReadOnlySpan<byte> Utf8(string text)
    {
        if (text.Length * 3 > _cell.Length)
        {
            _cell = new byte[text.Length * 3];
        }

        return _cell.AsSpan(0, Encoding.UTF8.GetBytes(text, _cell));
    }
}
