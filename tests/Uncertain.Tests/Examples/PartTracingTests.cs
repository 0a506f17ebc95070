using System.Globalization;
using PartTracing.Chances;
using PartTracing.Input;
using PartTracing.Queries;

namespace Uncertain.Tests.Examples;

public class PartTracingTests
{
    [Fact]
    public void Run_OwnData_WritesAnswersAndTellsTheStory()
    {
        ExampleRun run = ExampleRun.Default;

        Assert.Equal("", run.Error);
        Assert.Equal(0, run.ExitCode);
        Assert.StartsWith("query,value,probability,lower,upper,guarantee,evaluator\r\n", run.Answers, StringComparison.Ordinal);
        Assert.All(run.Rows, row =>
        {
            Assert.Equal(7, row.Length);
            double[] figures = [.. row[2..5].Select(cell => double.Parse(cell, CultureInfo.InvariantCulture))];
            Assert.InRange(figures[0], figures[1], figures[2]);
            Assert.InRange(figures[0], 0, 1);
            Assert.Equal("exact", row[5]);
        });
        Assert.Equal(
            ["bulletin-1", "bulletin-2", "only-bulletin-1", "delivery-on-file", "barge-liner"], run.Rows.Select(row => row[0]).Distinct());
        Assert.Contains("not hierarchical", run.Output, StringComparison.Ordinal);
        Assert.Contains("operator's own rules", run.Output, StringComparison.Ordinal);
        Assert.Contains("Closing check", run.Output, StringComparison.Ordinal);
        Assert.All(run.Output.Split(Environment.NewLine).Where(line => !line.StartsWith("All answers", StringComparison.Ordinal)),
            line => Assert.True(line.Length <= 100, line));
    }

    [Fact]
    public void Run_ChooserAndCompilation_GiveTheSameProbabilities()
    {
        ExampleRun chosen = ExampleRun.Default;
        var compiled = new ExampleRun("--evaluator", "compilation");

        AssertSame(compiled.Probabilities, chosen.Probabilities);
        Assert.All(compiled.Rows, row => Assert.Equal("compilation", row[6]));
    }

    [Fact]
    public void Run_SafePlan_AnswersTheSafeQuestionsAndSaysWhyNotTheOthers()
    {
        ExampleRun chosen = ExampleRun.Default;
        var safe = new ExampleRun("--evaluator", "safeplan");

        Assert.Equal(0, safe.ExitCode);
        Dictionary<(string Query, string Value), double> probabilities = safe.Probabilities;
        AssertSame(chosen.Probabilities.Where(p => probabilities.Keys.Any(key => key.Query == p.Key.Query)).ToDictionary(), probabilities);
        Assert.Contains(probabilities.Keys, key => key.Query == "bulletin-1");
        Assert.DoesNotContain(probabilities.Keys, key => key.Query == "delivery-on-file");
        Assert.Contains("Not answered, and not in answers.csv", safe.Output, StringComparison.Ordinal);
    }

    [Fact]
    public void Run_SamplingWithOneSeed_GivesTheSameFileAgain()
    {
        string[] arguments = ["--evaluator", "sampling", "--epsilon", "0.02", "--seed", "7"];
        var first = new ExampleRun(arguments);
        var second = new ExampleRun(arguments);

        Assert.Equal(0, first.ExitCode);
        Assert.Equal(first.Answers, second.Answers);
        Assert.Contains(first.Rows, row => row[5] == "99 % confidence");
    }

    [Fact]
    public void Run_FolderWithoutTruth_GivesTheSameAnswers()
    {
        using var data = new CopiedData();
        ExampleRun own = ExampleRun.Default;
        var copied = new ExampleRun("--data", data.Folder);

        Assert.Equal("", copied.Error);
        Assert.Equal(own.Answers, copied.Answers);
        Assert.DoesNotContain("Closing check", copied.Output, StringComparison.Ordinal);
    }

    [Theory]
    [InlineData("--evaluator", "fastest", "'fastest'")]
    [InlineData("--epsilon", "0", "between 0 and 1")]
    [InlineData("--epsilon", "much", "between 0 and 1")]
    [InlineData("--seed", "-1", "whole number")]
    [InlineData("--cut", "101", "0 to 100")]
    [InlineData("--fast", "x", "'--fast' is not an option")]
    public void Run_WrongOption_ExitsWith2AndNamesIt(string option, string value, string expected)
    {
        var run = new ExampleRun(option, value);

        Assert.Equal(2, run.ExitCode);
        Assert.Contains(expected, run.Error, StringComparison.Ordinal);
        Assert.Equal("", run.Output);
    }

    [Fact]
    public void Run_OptionWithoutValue_ExitsWith2()
    {
        var error = new StringWriter();

        Assert.Equal(2, PartTracing.Program.Run(["--seed"], TextWriter.Null, error));
        Assert.Contains("--seed needs a value", error.ToString(), StringComparison.Ordinal);
    }

    [Fact]
    public void Run_Help_NamesEveryOption()
    {
        var run = new ExampleRun("--help");

        Assert.Equal(0, run.ExitCode);
        Assert.All(
            ["--data", "--out", "--evaluator", "--epsilon", "--seed", "--cut"],
            option => Assert.Contains(option, run.Output, StringComparison.Ordinal));
    }

    [Fact]
    public void Run_MissingFile_ExitsWith1AndNamesIt()
    {
        using var data = new CopiedData();
        File.Delete(data.PathOf("lots.csv"));
        var run = new ExampleRun("--data", data.Folder);

        Assert.Equal(1, run.ExitCode);
        Assert.StartsWith("lots.csv is missing", run.Error, StringComparison.Ordinal);
    }

    [Theory]
    [InlineData("vessel,class,in_service\r\nBraldyn,Tender,perhaps\r\n", "vessels.csv, line 2: column 'in_service' holds 'perhaps'")]
    [InlineData("vessel,class\r\nBraldyn,Tender\r\n", "vessels.csv has no column 'in_service'")]
    [InlineData("vessel,class,in_service\r\nBraldyn,Tender\r\n", "vessels.csv cannot be read")]
    [InlineData("", "vessels.csv has no column 'vessel'")]
    [InlineData("vessel,class,in_service\r\nBraldyn,Tender,true\r\nBraldyn,Barge,true\r\n", "Braldyn")]
    public void Run_MalformedFile_ExitsWith1AndSaysWhere(string vessels, string expected)
    {
        using var data = new CopiedData();
        File.WriteAllText(data.PathOf("vessels.csv"), vessels);
        var run = new ExampleRun("--data", data.Folder);

        Assert.Equal(1, run.ExitCode);
        Assert.Contains(expected, run.Error, StringComparison.Ordinal);
    }

    [Fact]
    public void Run_EmptyBulletins_FindsNothing()
    {
        using var data = new CopiedData();
        File.WriteAllText(data.PathOf("bulletin.csv"), "lot_code\r\n");
        File.WriteAllText(data.PathOf("bulletin_2.csv"), "lot_code\r\n");
        var run = new ExampleRun("--data", data.Folder);

        Assert.Equal("", run.Error);
        Assert.All(run.Rows, row => Assert.Equal(["barge-liner", "yes", "0"], row[..3]));
    }

    [Fact]
    public void Run_SuspectLotThatIsNotListed_SaysSo()
    {
        using var data = new CopiedData();
        File.AppendAllText(data.PathOf("bulletin.csv"), "XX-X0000\r\n");

        Assert.Contains("Beware: XX-X0000", new ExampleRun("--data", data.Folder).Output, StringComparison.Ordinal);
    }

    [Fact]
    public void Chances_OfAField_AddUpToLessThanOne()
    {
        FerryData data = FerryData.Load(ExampleRun.DataFolder);
        var fields = Calibration.Fit(data.Sample, data.Lists).Apply(data.Readings).GroupBy(c => (c.Reading.DocumentId, c.Reading.Field));

        Assert.All(fields, field => Assert.InRange(field.Sum(c => c.Chance), 0, 1 - 1e-6));
        Assert.Contains(fields, field => field.Count() > 1);
    }

    // Cards are independent, and so are the fields of a card: the chance that none of the cards puts a suspect lot on the vessel
    // is a product. Computed here without the library.
    [Fact]
    public void Bulletin1_AllVessels_EqualTheProductOverCards()
    {
        FerryData data = FerryData.Load(ExampleRun.DataFolder);
        HashSet<string> inService = [.. data.Vessels.Where(vessel => vessel.InService).Select(vessel => vessel.Name)];
        ILookup<string, CalibratedReading> cards = Calibration.Fit(data.Sample, data.Lists).Apply(data.Readings)
            .Where(c => data.Cards.Contains(c.Reading.DocumentId)).ToLookup(c => c.Reading.DocumentId);
        var none = new Dictionary<(string Query, string Value), double>();
        foreach (IGrouping<string, CalibratedReading> card in cards)
        {
            double suspect = card
                .Where(c => c.Reading.Field == ClosedLists.LotCode && data.Bulletin1.Contains(c.Reading.Text))
                .Sum(c => c.Chance);
            foreach (CalibratedReading c in card.Where(c => c.Reading.Field == ClosedLists.Vessel && inService.Contains(c.Reading.Text)))
            {
                if (suspect > 0)
                {
                    (string, string) key = ("bulletin-1", c.Reading.Text);
                    none[key] = none.GetValueOrDefault(key, 1) * (1 - (suspect * c.Chance));
                }
            }
        }

        ExampleRun run = ExampleRun.Default;
        AssertSame(
            none.ToDictionary(n => n.Key, n => 1 - n.Value),
            run.Probabilities.Where(p => p.Key.Query == "bulletin-1").ToDictionary());
    }

    // The folder's own tables of affected vessels were made with the slips, apart from this code.
    [Theory]
    [InlineData(0, "affected_vessels.csv")]
    [InlineData(1, "affected_vessels_2.csv")]
    public void Questions_OverTheTruth_FindTheAffectedVessels(int question, string file)
    {
        FerryData data = FerryData.Load(ExampleRun.DataFolder);
        IReadOnlyList<Reading> truth = Truth.Load(ExampleRun.DataFolder)!;
        IEnumerable<string> found = Questions.CertainAnswers(Archive.OfTruth(data, truth), data)[question];

        IEnumerable<string> expected = File.ReadLines(Path.Combine(ExampleRun.DataFolder, "truth", file))
            .Skip(1).Select(line => line.Split(',')[0]);
        Assert.Equal(expected.Order(StringComparer.Ordinal), found.Order(StringComparer.Ordinal));
    }

    [Fact]
    public void Bulletin1_AgainstTheTruth_IsCloserThanAnyCut()
    {
        FerryData data = FerryData.Load(ExampleRun.DataFolder);
        IReadOnlySet<string> affected = Questions.CertainAnswers(
            Archive.OfTruth(data, Truth.Load(ExampleRun.DataFolder)!), data)[0];
        double Brier(Archive archive)
        {
            Dictionary<string, double> said = Questions.Over(archive, data)[0].Ask(EvaluationOptions.Default).Findings
                .ToDictionary(f => f.Value, f => f.Probability.Value);
            return data.Vessels.Where(vessel => vessel.InService)
                .Average(vessel => Math.Pow(said.GetValueOrDefault(vessel.Name) - (affected.Contains(vessel.Name) ? 1 : 0), 2));
        }

        double ours = Brier(Archive.WithChances(data, Calibration.Fit(data.Sample, data.Lists)));

        Assert.All([0, 20, 40, 60, 80, 90], cut => Assert.True(ours < Brier(Archive.CutAt(data, cut)), $"cut {cut}"));
    }

    private static void AssertSame(
        Dictionary<(string Query, string Value), double> expected, Dictionary<(string Query, string Value), double> actual)
    {
        Assert.NotEmpty(expected);
        Assert.Equal(expected.Keys.Order(), actual.Keys.Order());
        Assert.All(expected, pair => Assert.Equal(pair.Value, actual[pair.Key], 1e-12));
    }
}
