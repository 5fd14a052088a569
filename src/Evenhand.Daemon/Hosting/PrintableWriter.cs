using System.Globalization;
using System.Text;

namespace Evenhand.Daemon.Hosting;

/// <summary>Writes text for people: characters that would steer a terminal or turn the direction of reading come out as <c>\u{…}</c>.</summary>
internal sealed class PrintableWriter(TextWriter to) : TextWriter(CultureInfo.InvariantCulture)
{
    /// <inheritdoc/>
    public override Encoding Encoding => to.Encoding;

    /// <inheritdoc/>
    public override void Write(char value)
    {
        bool steers = value is not ('\n' or '\r' or '\t')
            && CharUnicodeInfo.GetUnicodeCategory(value) is UnicodeCategory.Control or UnicodeCategory.Format or UnicodeCategory.LineSeparator or UnicodeCategory.ParagraphSeparator;
        if (steers)
        {
            to.Write($"\\u{{{(int)value:X4}}}");
        }
        else
        {
            to.Write(value);
        }
    }

    /// <inheritdoc/>
    public override void Flush() => to.Flush();
}
