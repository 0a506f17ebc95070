using System.Runtime.CompilerServices;

namespace Uncertain.Tests.Execution;

/// <summary>A query object that is evaluated again, and the same C# query built again: each evaluation sees what holds at its time.</summary>
public sealed class HeldQueryTests
{
    private sealed record Reading(string Slip, int Lot);

    private sealed class Limit
    {
        public int Lot { get; set; }
    }

    private readonly WorldSpace _worlds = new();
    private readonly UncertainSet<Reading> _readings;

    public HeldQueryTests() => _readings = _worlds.Independent(
        [new("S1", 1), new("S2", 3), new("S2", 4), new("S3", 7)], (Reading reading) => reading.Lot / 10.0, name: "readings");

    public static TheoryData<string> Names => ["chooser", "safe plan", "compilation"];

    [Theory]
    [MemberData(nameof(Names))]
    public void Evaluate_CapturedVariableChanged_UsesItsValueAtTheEvaluation(string name)
    {
        EvaluationOptions options = OptionsOf(name);
        int least = 3;
        string mark = "a";
        UncertainSet<string> query = from reading in _readings where reading.Lot >= least select reading.Slip + mark;
        Assert.Equal(["S2a", "S3a"], ValuesOf(query, options));

        (least, mark) = (4, "b");

        Assert.Equal(["S2b", "S3b"], ValuesOf(query, options));
        Assert.Equal(0.4, query.Evaluate(options)[0].Probability.Value, 1e-15);
    }

    [Theory]
    [MemberData(nameof(Names))]
    public void Evaluate_CapturedObjectChanged_UsesItsStateAtTheEvaluation(string name)
    {
        EvaluationOptions options = OptionsOf(name);
        var limit = new Limit { Lot = 7 };
        UncertainSet<string> query = _readings.Where(reading => reading.Lot >= limit.Lot).Select(reading => reading.Slip);
        Assert.Equal(["S3"], ValuesOf(query, options));

        limit.Lot = 1;

        Assert.Equal(["S1", "S2", "S3"], ValuesOf(query, options));
    }

    [Theory]
    [MemberData(nameof(Names))]
    public void Evaluate_CapturedSetChanged_UsesTheSetAtTheEvaluation(string name)
    {
        EvaluationOptions options = OptionsOf(name);
        UncertainSet<int> lots = _worlds.Certain([1, 3]);

        // A set that depends on the element in a way that is no filter is read when the query runs.
        UncertainSet<int> query = _readings.SelectMany(reading => lots.Where(lot => lot == reading.Lot).Select(lot => lot * 10));
        Assert.Equal([10, 30], ValuesOf(query, options));

        lots = _worlds.Certain([7]);

        Assert.Equal([70], ValuesOf(query, options));
    }

    [Theory]
    [MemberData(nameof(Names))]
    public void Evaluate_SameTextOtherValues_HasItsOwnAnswers(string name)
    {
        EvaluationOptions options = OptionsOf(name);
        for (int least = 0; least < 9; least++)
        {
            UncertainSet<int> query = from reading in _readings where reading.Lot >= least select reading.Lot - least;

            Assert.Equal(new[] { 1, 3, 4, 7 }.Where(lot => lot >= least).Select(lot => lot - least), ValuesOf(query, options));
        }
    }

    [Fact]
    public void Evaluate_HeldOnManyThreads_GivesTheSameAnswers()
    {
        UncertainSet<string> query = from reading in _readings
                                     join other in _worlds.Certain([3, 4, 7]) on reading.Lot equals other
                                     select reading.Slip;

        Parallel.For(0, 200, _ =>
        {
            IReadOnlyList<Answer<string>> answers = query.Evaluate();
            Assert.Equal(["S2", "S3"], answers.Select(answer => answer.Value));
            Assert.Equal(1 - (0.7 * 0.6), answers[0].Probability.Value, 1e-15);
        });
    }

    [Fact]
    public void Evaluate_QueryDropped_KeepsNothingOfIt()
    {
        WeakReference[] dropped = Run();

        for (int i = 0; i < 10 && dropped.Any(reference => reference.IsAlive); i++)
        {
            GC.Collect();
            GC.WaitForPendingFinalizers();
        }

        Assert.All(dropped, reference => Assert.False(reference.IsAlive));

        [MethodImpl(MethodImplOptions.NoInlining)]
        static WeakReference[] Run()
        {
            var worlds = new WorldSpace();
            var limit = new Limit { Lot = 2 };
            Reading[] records = [new("S1", 1), new("S2", 3)];
            UncertainSet<Reading> readings = worlds.Independent(records, _ => 0.5);
            var query = from reading in readings
                        join lot in worlds.Certain([3]) on reading.Lot equals lot
                        where reading.Lot > limit.Lot
                        select new { reading.Slip, limit };
            Assert.Single(query.Evaluate());
            Assert.Single(query.Evaluate(Evaluators.Compilation));
            return [new(worlds), new(limit), new(records[0]), new(readings), new(query)];
        }
    }

    private static EvaluationOptions OptionsOf(string name) => new()
    {
        Evaluator = name switch
        {
            "chooser" => Evaluators.Chooser,
            "safe plan" => Evaluators.SafePlan,
            _ => Evaluators.Compilation,
        },
    };

    private static IEnumerable<T> ValuesOf<T>(UncertainSet<T> query, EvaluationOptions options) =>
        query.Evaluate(options).Select(answer => answer.Value);
}
