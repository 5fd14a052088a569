using System.Globalization;
using System.Security.Cryptography;
using System.Text;
using Evenhand.Monitoring.Charters.Yaml;

namespace Evenhand.Monitoring.Charters;

/// <summary>Reads charters, format <c>charter/1</c> (see charter-format.md beside this file).</summary>
/// <remarks>
/// 1. The bytes are checked: size, UTF-8. 2. The notation is read into nodes with places. 3. One reader a concern takes
/// its keys and reports what is wrong with each. 4. One validator a concern checks what refers to something else, passing
/// over what is wrong already. 5. If nothing was reported, the charter is built.
/// </remarks>
public static class CharterParser
{
    private static readonly UTF8Encoding Utf8 = new(encoderShouldEmitUTF8Identifier: false);

    /// <summary>Reads a charter in YAML 1.2 or JSON and reports every problem at once.</summary>
    /// <param name="fileName">The file's name, for messages.</param>
    /// <param name="utf8">The file's bytes; a byte order mark may stand in front.</param>
    /// <param name="use">What the charter is read for.</param>
    /// <param name="fileExists">Answers whether a file named by the charter is there, its name being relative to the charter; null means files are not looked for.</param>
    /// <returns>The charter, or the problems in file order. Never throws on what the bytes hold.</returns>
    public static CharterResult Parse(
        string fileName,
        ReadOnlySpan<byte> utf8,
        CharterUse use = CharterUse.Monitoring,
        Func<string, bool>? fileExists = null)
    {
        ArgumentNullException.ThrowIfNull(fileName);
        var problems = new CharterProblems(fileName);
        if (!IsReadable(utf8, problems))
        {
            return new(null, problems.InFileOrder());
        }

        // 2. The notation.
        string text = Utf8.GetString(utf8);
        YamlDocument document = YamlDocument.Read(text.TrimStart('\uFEFF'));
        foreach (YamlFault fault in document.Faults)
        {
            problems.Report(fault.Line, fault.Column, "yaml", fault.Wrong, fault.Mend);
        }

        if (document.Root is not MapNode map)
        {
            ReportRoot(document, problems);
            return new(null, problems.InFileOrder());
        }

        // 3. and 4. The parts, then what refers from one to another.
        var root = new MapReader(map, "", CharterShapes.Charter, problems);
        CharterDraft draft = CharterBuilder.Read(root, use, new CharterFiles(fileExists));
        NameValidator.Check(draft);
        GroupingValidator.Check(draft);
        FieldUseValidator.Check(draft);
        AlertValidator.Check(draft);
        Charter? charter = problems.Count > 0 ? null : CharterBuilder.Build(draft, text, Convert.ToHexStringLower(SHA256.HashData(utf8)));
        return new(charter, problems.InFileOrder());
    }

    private static bool IsReadable(ReadOnlySpan<byte> utf8, CharterProblems problems)
    {
        if (utf8.Length > CharterLimits.Bytes)
        {
            problems.Report(
                1, 1, "file", string.Create(CultureInfo.InvariantCulture, $"has {utf8.Length:N0} bytes"), "shorten it to 1 MiB (1,048,576 bytes) at most");
            return false;
        }

        int valid = ValidPrefix(utf8);
        if (valid == utf8.Length)
        {
            return true;
        }

        ReadOnlySpan<byte> before = utf8[..valid];
        int line = before.Count((byte)'\n') + 1;
        int column = Utf8.GetCharCount(before[(before.LastIndexOf((byte)'\n') + 1)..]) + 1;
        problems.Report(
            line, column, "file", string.Create(CultureInfo.InvariantCulture, $"is not valid UTF-8: byte 0x{utf8[valid]:X2}"), "save the file as UTF-8");
        return false;
    }

    private static int ValidPrefix(ReadOnlySpan<byte> utf8)
    {
        int at = 0;
        while (at < utf8.Length && Rune.DecodeFromUtf8(utf8[at..], out _, out int length) == System.Buffers.OperationStatus.Done)
        {
            at += length;
        }

        return at;
    }

    private static void ReportRoot(YamlDocument document, CharterProblems problems)
    {
        if (problems.Count > 0)
        {
            return;
        }

        SourceNode? root = document.Root;
        problems.Report(
            root?.Line ?? 1,
            root?.Column ?? 1,
            "charter",
            root is null or { IsNull: true } ? "the file is empty" : $"the file is {root.Kind}",
            "write keys and values, beginning with charter: and the stream's id");
    }
}
