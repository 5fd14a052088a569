using System.Globalization;
using System.Text;

namespace Evenhand.Monitoring.Charters.Yaml;

/// <summary>Shows a text of the file inside a one-line message.</summary>
internal static class QuotedText
{
    private const int Longest = 60;

    /// <summary>The text in quotation marks, shortened, control characters escaped.</summary>
    public static string Of(string text) => $"\"{OneLine(text)}\"";

    /// <summary>The text shortened, control characters escaped.</summary>
    public static string OneLine(string text)
    {
        var shown = new StringBuilder(Math.Min(text.Length, Longest) + 8);
        foreach (Rune rune in text.EnumerateRunes())
        {
            if (shown.Length >= Longest)
            {
                shown.Append('…');
                break;
            }

            bool unseen = Rune.IsControl(rune)
                || Rune.GetUnicodeCategory(rune) is UnicodeCategory.LineSeparator or UnicodeCategory.ParagraphSeparator or UnicodeCategory.Format;
            shown.Append(unseen ? $"\\u{rune.Value:x4}" : rune.ToString());
        }

        return shown.ToString();
    }
}
