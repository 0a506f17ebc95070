namespace Uncertain.ReferenceCheck.Cases;

/// <summary>An expected figure: its key in a list of several, its text in the file and its value.</summary>
/// <param name="Key">Key of an item; empty for a single figure.</param>
/// <param name="Text">The figure as printed in the file.</param>
/// <param name="Value">Its value; the printed digits where the file gives no fraction.</param>
/// <param name="IsFraction">Whether <paramref name="Value"/> is exact, not rounded to the printed digits.</param>
internal sealed record Expected(string Key, string Text, Rational Value, bool IsFraction)
{
    /// <summary>Reads the field <c>expected</c> of a case.</summary>
    public static IReadOnlyList<Expected> Read(Field field) => field["type"].Text switch
    {
        "scalar" => [ReadFigure(field, "")],
        "items" => [.. field["items"].Items().Select(item => ReadFigure(item, item["key"].Text))],
        _ => throw field["type"].Wrong("\"scalar\" or \"items\""),
    };

    private static Expected ReadFigure(Field field, string key)
    {
        Field text = field["decimal"];
        Field? fraction = field.Optional("exact");
        return new Expected(key, text.Text, (fraction ?? text).Number, fraction is not null);
    }
}
