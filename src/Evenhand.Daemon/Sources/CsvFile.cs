using System.Text;
using Evenhand.Monitoring.Records;
using nietras.SeparatedValues;

namespace Evenhand.Daemon.Sources;

/// <summary>CSV with a header row; the separator is inferred from it.</summary>
/// <remarks>Bytes that are not UTF-8 arrive as U+FFFD, and a row that holds one is rejected: it could not be told from damage.</remarks>
internal sealed class CsvFile : RecordFile
{
    private const char ReplacementCharacter = '\uFFFD';

    private readonly RawInput _raw;
    private readonly SepReader _reader;
    private readonly RowDecoder _decoder;
    private readonly int _columns;
    private byte[] _cell = new byte[1024];

    public CsvFile(RawInput raw, Stream content, Decoding decoding, string name)
    {
        _raw = raw;
        _decoder = new RowDecoder(decoding.Charter, decoding.Layout, decoding.Hasher, decoding.Kind);
        _reader = Open(content, name);
        if (_reader.Header.ColNames.Count == 0 || _reader.IsEmpty)
        {
            throw new SourceException($"{name}: is empty; a CSV file begins with a row of column names");
        }

        _columns = _reader.Header.ColNames.Count;
        ColumnBinding.Bind(_decoder, _reader.Header.ColNames, name);
    }

    public override long? Length => _raw.Limit;

    public override long BytesRead => _raw.BytesRead;

    public override long DefaultTime
    {
        get => _decoder.DefaultTime;
        set => _decoder.DefaultTime = value;
    }

    public override string Sha256
    {
        get
        {
            _raw.Drain();
            return _raw.Sha256;
        }
    }

    public override string? Warning => _raw.HasGrown
        ? $"{Name} grew while it was read: the first {_raw.Limit:N0} bytes were used"
        : null;

    public override string PlaceOf(long position) => FormattableString.Invariant($" row {position + 1}");

    public override bool Fill(RecordBatch batch)
    {
        while (!batch.IsFull)
        {
            if (!Next())
            {
                return false;
            }

            Decode(batch);
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
            _reader.Dispose();
            _raw.Dispose();
        }
    }

    private static SepReader Open(Stream content, string name)
    {
        try
        {
            return Sep.Reader(o => o with { Unescape = true, DisableColCountCheck = true, HasHeader = true }).From(content);
        }
        catch (Exception e) when (e is InvalidDataException or EndOfStreamException)
        {
            throw ContentReader.Damaged(name, e);
        }
        catch (ArgumentException e)
        {
            throw new SourceException($"{name}: the header names a column twice; name each once", e);
        }
    }

    private bool Next()
    {
        try
        {
            return _reader.MoveNext();
        }
        catch (Exception e) when (e is InvalidDataException or EndOfStreamException)
        {
            throw ContentReader.Damaged(Name, e);
        }
        catch (NotSupportedException e)
        {
            throw new SourceException($"{Name}: row {Position + 1:N0} is longer than can be read; look for a quotation mark that is not closed", e);
        }
    }

    private void Decode(RecordBatch batch)
    {
        SepReader.Row row = _reader.Current;
        if (row.Span.Count('"') % 2 != 0)
        {
            RejectUnclosed(row.Span, batch);
            return;
        }

        if (row.ColCount != _columns)
        {
            batch.Reject(row.Span.IsWhiteSpace() ? RejectReason.BlankLine : RejectReason.RaggedRow, Position);
            return;
        }

        if (row.Span.Contains(ReplacementCharacter))
        {
            batch.Reject(RejectReason.InvalidUtf8, Position);
            return;
        }

        _decoder.Begin();
        foreach (int column in _decoder.Columns)
        {
            _decoder.Set(column, Utf8(row[column].Span));
        }

        _decoder.End(batch, Position);
    }

    /// <summary>A quotation mark that is never closed takes the rest of the file into one row: no rejection of a row, unless it is the last line.</summary>
    private void RejectUnclosed(ReadOnlySpan<char> row, RecordBatch batch)
    {
        int further = row.TrimEnd("\r\n").Count('\n');
        if (further > 0)
        {
            throw new SourceException($"{Name}: a quotation mark in row {Position + 1:N0} is never closed and takes in {further:N0} further line{(further == 1 ? "" : "s")}; close it, or double it if it belongs to the text");
        }

        batch.Reject(RejectReason.RaggedRow, Position);
    }

    private ReadOnlySpan<byte> Utf8(ReadOnlySpan<char> text)
    {
        int most = text.Length * 3;
        if (most > _cell.Length)
        {
            _cell = new byte[Math.Max(most, _cell.Length * 2)];
        }

        return _cell.AsSpan(0, Encoding.UTF8.GetBytes(text, _cell));
    }
}
