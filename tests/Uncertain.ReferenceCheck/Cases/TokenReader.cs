namespace Uncertain.ReferenceCheck.Cases;

/// <summary>Words of a text, separated by white space, with the line on which each stands.</summary>
internal sealed class TokenReader(TextReader reader)
{
    private int _line;
    private string[] _words = [];
    private int _next;

    public string? TryNext()
    {
        while (_next == _words.Length)
        {
            if (reader.ReadLine() is not { } line)
            {
                return null;
            }

            _line++;
            _words = line.Split((char[]?)null, StringSplitOptions.RemoveEmptyEntries);
            _next = 0;
        }

        return _words[_next++];
    }

    public string Next(string expected) =>
        TryNext() ?? throw new MalformedCaseException($"line {_line}: the file ends where {expected} should come");

    public void Expect(string word, string expected)
    {
        string found = Next(expected);
        if (found != word)
        {
            throw Wrong(found, expected);
        }
    }

    public MalformedCaseException Wrong(string found, string expected) =>
        new($"line {_line}: found '{(found.Length > 40 ? found[..40] + "..." : found)}' where {expected} should come");
}
