using System.Text.RegularExpressions;
using Xunit.Abstractions;

namespace Uncertain.Tests.Queries;

public sealed class TempTests(ITestOutputHelper output)
{
    [Theory]
    [InlineData(0)]
    [InlineData(1)]
    public void Derive(int g)
    {
        ICaseGenerator generator = g == 0 ? new CaseGenerator() : new HierarchicalCaseGenerator();
        var c = new CaseChecker();
        string mode = Environment.GetEnvironmentVariable("MODE") ?? "safe";
        string? Check(TestCase t)
        {
            try
            {
                var e = t.Expect();
                var b = t.Shape.Build(t);
                return mode == "safe" ? c.CheckSafePlan(e, b) : c.CheckEvaluator(e, b, mode == "compilation" ? Evaluators.Compilation : Evaluators.Chooser);
            }
            catch (Exception x)
            {
                return string.Join("\n", x.ToString().Split('\n').Take(7));
            }
        }

        var kinds = new Dictionary<string, int>();
        int first = 1_000_000 * (g + 1);
        for (int i = 0; i < RandomQueryRun.TotalCases / 2; i++)
        {
            var t = generator.Next(new Random(first + i));
            File.WriteAllText($"/tmp/t-tests/case{g}.txt", $"seed {first + i}\n{t}");
            if (Check(t) is { } f)
            {
                string k = Regex.Replace(Regex.Replace(f.Split('\n')[0], "new Row.*", ""), "[0-9'A-C]", "") + f.Split('\n').ElementAtOrDefault(2)?.Trim();
                kinds[k] = kinds.GetValueOrDefault(k) + 1;
                if (kinds[k] <= 2 && kinds.Count < 10)
                {
                    (TestCase s, string sf) = Shrinker.Shrink(t, f, Check);
                    output.WriteLine($"--- seed {first + i}\n{s}{sf}\n");
                }
            }
        }

        foreach (var p in kinds)
        {
            output.WriteLine($"{p.Value}x {p.Key}");
        }

        output.WriteLine($"{c.Suitable} suitable");
    }
}
