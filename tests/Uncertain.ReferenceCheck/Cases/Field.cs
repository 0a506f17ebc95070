using System.Globalization;
using System.Text.Json;

namespace Uncertain.ReferenceCheck.Cases;

/// <summary>A part of a case with the way that leads to it, so that every complaint names the place.</summary>
internal readonly struct Field(JsonElement element, string path)
{
    private readonly JsonElement _element = element;

    public string Path { get; } = path;

    public bool IsList => _element.ValueKind == JsonValueKind.Array;

    public bool IsText => _element.ValueKind == JsonValueKind.String;

    public bool IsNull => _element.ValueKind is JsonValueKind.Null or JsonValueKind.Undefined;

    public bool IsTrue => _element.ValueKind == JsonValueKind.True;

    public bool IsFalse => _element.ValueKind == JsonValueKind.False;

    public string Text => IsText ? _element.GetString()! : throw Wrong("a string");

    public int Count => IsList ? _element.GetArrayLength() : throw Wrong("a list");

    /// <summary>The exact number of a string or a number.</summary>
    public Rational Number
    {
        get
        {
            string text = _element.ValueKind switch
            {
                JsonValueKind.String => _element.GetString()!,
                JsonValueKind.Number => _element.GetRawText(),
                _ => throw Wrong("a number or a fraction"),
            };
            return Rational.TryParse(text, out Rational value) ? value : throw Wrong("a number or a fraction such as \"1/3\"");
        }
    }

    /// <summary>A number from 0 to 1.</summary>
    public Rational Probability => Number is { Sign: >= 0 } exact && (Rational.One - exact).Sign >= 0
        ? exact
        : throw Wrong("a probability from 0 to 1");

    public Chance Chance => Chance.Of(Probability);

    public Field this[string name] => Optional(name) ?? throw new MalformedCaseException($"{Path} has no field '{name}'");

    public Field? Optional(string name)
    {
        if (_element.ValueKind != JsonValueKind.Object)
        {
            throw Wrong("an object");
        }

        return _element.TryGetProperty(name, out JsonElement member) && member.ValueKind != JsonValueKind.Null
            ? new Field(member, $"{Path}.{name}")
            : null;
    }

    public bool Flag(string name) => Optional(name) is { } flag && (flag.IsTrue || (!flag.IsFalse ? throw flag.Wrong("true or false") : false));

    public int Integer(int least, int most) =>
        _element.ValueKind == JsonValueKind.Number && _element.TryGetInt32(out int value) && value >= least && value <= most
            ? value
            : throw Wrong(string.Create(CultureInfo.InvariantCulture, $"an integer from {least} to {most}"));

    public IEnumerable<Field> Items()
    {
        int count = Count;
        for (int i = 0; i < count; i++)
        {
            yield return new Field(_element[i], $"{Path}[{i}]");
        }
    }

    public IEnumerable<(string Name, Field Value)> Members()
    {
        if (_element.ValueKind != JsonValueKind.Object)
        {
            throw Wrong("an object");
        }

        foreach (JsonProperty member in _element.EnumerateObject())
        {
            yield return (member.Name, new Field(member.Value, $"{Path}.{member.Name}"));
        }
    }

    public MalformedCaseException Wrong(string expected)
    {
        string found = IsNull ? "nothing" : _element.GetRawText();
        return new MalformedCaseException($"{Path} must be {expected}, but is {(found.Length > 60 ? found[..60] + "..." : found)}");
    }
}
