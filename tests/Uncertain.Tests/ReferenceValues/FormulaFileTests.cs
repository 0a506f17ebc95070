using Uncertain.ReferenceCheck;

namespace Uncertain.Tests.ReferenceValues;

public sealed class FormulaFileTests
{
    [Theory]
    [InlineData("p dnf 3 2\n0.5 0.25 0.5\n1 2 0\n-2 3 0\n", 0.5)] // 1/8 + 3/8
    [InlineData("p cnf 3 2\n0.5 0.25 0.5\n1 2 0\n-2 3 0\n", 0.5)] // (x1 or x2) and (not x2 or x3): 1/8 + 3/8
    [InlineData("p dnf 2 1\n1/3\n3/4\n1\n2 0", 0.25)]
    [InlineData("p cnf 0 0", 1)]
    [InlineData("p dnf 0 0", 0)]
    [InlineData("p cnf 1 1 0.5 0", 0)]
    [InlineData("p dnf 1 1 0.5 0", 1)]
    [InlineData("p dnf 1 2 1e-30 1 0 1 0", 1e-30)]
    public void Formula_OfEitherForm_HasItsProbability(string text, double expected)
    {
        using var file = new TemporaryFile(text);
        (bool isRight, string output, string errors) = Run(file.Path);

        Assert.True(isRight, errors);
        string[] fields = output.Split('\n')[0].Split('\t');
        Assert.Equal(6, fields.Length);
        Assert.Equal((Path.GetFileName(file.Path), "-", "-"), (fields[0], fields[1], fields[3]));
        Assert.Equal(expected, double.Parse(fields[2], System.Globalization.CultureInfo.InvariantCulture), expected * 1e-14);
        Assert.Equal("computed: exact", fields[5]);
    }

    [Theory]
    [InlineData("p dnf 2 2\n0.9999999999 0.9999999999\n1 0\n2 0", "0.99999999999999999999")] // 1 - 1e-20
    [InlineData("p cnf 2 2\n1e-200 1e-300\n1 0\n2 0", "1e-500")]
    public void Formula_BeyondTheDigitsOfADouble_IsPrintedWithThem(string text, string expected)
    {
        using var file = new TemporaryFile(text);
        (_, string output, _) = Run(file.Path);

        Assert.StartsWith(expected, output.Split('\t')[2], StringComparison.Ordinal);
    }

    [Theory]
    [InlineData("", "line 0: the file ends where 'p', the start of")]
    [InlineData("p sat 1 1", "line 1: found 'sat' where 'dnf' or 'cnf' should come")]
    [InlineData("p dnf -1 1", "line 1: found '-1' where the number of variables")]
    [InlineData("p dnf 99999999999 1", "line 1: found '99999999999' where the number of variables")]
    [InlineData("p dnf 2000000000 1\n0.5\n", "line 2: the file ends where the probability of variable 2 should come")]
    [InlineData("p dnf 1 1\n1.5\n1 0", "line 2: found '1.5' where the probability of variable 1, a number from 0 to 1 should come")]
    [InlineData("p dnf 1 1\nNaN\n1 0", "line 2: found 'NaN'")]
    [InlineData("p dnf 1 1\n1e-999999999\n1 0", "line 2: found '1e-999999999'")]
    [InlineData("p dnf 1 1\n1/0\n1 0", "line 2: found '1/0'")]
    [InlineData("p dnf 2 1\n0.5 0.5\n1 3 0", "line 3: found '3' where a literal of term 1 of 1")]
    [InlineData("p cnf 2 2\n0.5 0.5\n1 2 0\n1", "line 4: the file ends where a literal of clause 2 of 2")]
    [InlineData("p cnf 1 1\n0.5\n1 0\n1 0", "line 4: found '1' where the end of the file after 1 clauses should come")]
    [InlineData("[1, 2", "line 1: not valid JSON")]
    [InlineData("{}", "must hold a JSON list of cases")]
    public void File_OfNoFormat_IsNamedWithLineAndReason(string text, string expected)
    {
        using var file = new TemporaryFile(text);
        (bool isRight, string output, string errors) = Run(file.Path);

        Assert.False(isRight);
        Assert.Contains($"{file.Path}: {expected}", errors);
        Assert.DoesNotContain("   at ", errors + output);
    }

    [Fact]
    public void File_ThatIsMissing_IsNamed()
    {
        string path = Path.Combine(Path.GetTempPath(), Guid.NewGuid().ToString());
        (bool isRight, _, string errors) = Run(path);

        Assert.False(isRight);
        Assert.Contains(path, errors);
    }

    [Theory]
    [InlineData("""[{"id":"a"}]""", "a\t-\t-\t-\t", "malformed: file[0] has no field 'input'")]
    [InlineData("""[{"id":"a","input":{"kind":"riddle"}}]""", "a\t", "malformed: file[0].input.kind must be a known kind of question, but is \"riddle\"")]
    [InlineData("""[{"id":"a","input":{"kind":"queens","n":3,"p":"3/2"}}]""", "a\t", "malformed: file[0].input.p must be a probability from 0 to 1")]
    [InlineData("""[{"id":"a","input":{"kind":"formula","formula":["and","x"]}}]""", "a\t", "malformed: file[0].input.formula[1] must be a known name")]
    [InlineData("""[7]""", "case 1\t", "malformed: file[0] must be an object")]
    [InlineData(
        """[{"id":"a","input":{"kind":"network","graph":{"generator":"complete","n":2000000},"p":"1/2","terminals":"all"}}]""", "a\t",
        "malformed: file[0].input.graph.n must be an integer from 1 to 2000")]
    [InlineData(
        """[{"id":"a","input":{"kind":"formula","blocks":{"b":{"1":"2/3","2":"2/3"}},"formula":"b=1"}}]""", "a\t", "malformed: The chances of")]
    public void Case_ThatIsMalformed_IsReportedAndTheNextIsStillRun(string text, string start, string verdict)
    {
        const string Next = """,{"id":"next","input":{"kind":"formula","variables":{"x":"1/2"},"formula":"x"},"expected":{"type":"scalar","decimal":"0.5"}}]""";
        using var file = new TemporaryFile(text[..^1] + Next);
        (bool isRight, string output, _) = Run(file.Path);

        Assert.False(isRight);
        string[] lines = output.Split('\n');
        Assert.StartsWith(start, lines[0], StringComparison.Ordinal);
        Assert.Contains(verdict, lines[0]);
        Assert.EndsWith("\tok", lines[1].TrimEnd(), StringComparison.Ordinal);
        Assert.Equal("2 cases: 1 ok, 1 malformed", lines[2].TrimEnd());
    }

    [Fact]
    public void Case_WithAnotherExpectation_IsWrong()
    {
        using var file = new TemporaryFile(
            """[{"id":"a","input":{"kind":"formula","variables":{"x":"1/3"},"formula":"x"},"expected":{"type":"scalar","decimal":"0.333333333"}}]""");
        (bool isRight, string output, _) = Run(file.Path);

        Assert.False(isRight);
        Assert.Contains("\twrong", output);
    }

    [Theory]
    [InlineData("--evaluator", "oracle", "file")]
    [InlineData("--seconds", "0", "file")]
    [InlineData("--seconds", "NaN", "file")]
    [InlineData("--speed", "file")]
    [InlineData("file", "--seconds")]
    [InlineData]
    public void Arguments_ThatMakeNoSense_AreRefused(params string[] arguments) =>
        Assert.Throws<ArgumentException>(() => CommandLine.Parse(arguments));

    private static (bool IsRight, string Output, string Errors) Run(string path)
    {
        using var output = new StringWriter();
        using var errors = new StringWriter();
        bool isRight = Checker.Run(CommandLine.Parse(["--evaluator", "compilation", "--seconds", "20", path]), output, errors);
        return (isRight, output.ToString(), errors.ToString());
    }
}
