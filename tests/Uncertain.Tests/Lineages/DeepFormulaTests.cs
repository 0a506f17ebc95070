using Uncertain.Lineages;

namespace Uncertain.Tests.Lineages;

/// <summary>Formulas of a million nested nodes: no operation may recurse over them. Runs on a thread with a small stack.</summary>
public sealed class DeepFormulaTests
{
    private const int Depth = 1_000_000;
    private const int StackBytes = 256 * 1024;

    [Fact]
    public void Build_MillionNested_DoesNotOverflowTheStack() => OnSmallStack(() =>
    {
        Lineage deep = Nested(new WorldSpace(), "a");

        Assert.Equal(LineageKind.Conjunction, deep.Kind);
        Assert.Equal(2, deep.Operands.Length);
    });

    [Fact]
    public void ToString_MillionNested_IsCut() => OnSmallStack(() =>
    {
        Lineage deep = Nested(new WorldSpace(), "a");

        Assert.Equal(201, deep.ToString().Length);
        Assert.EndsWith("…", deep.ToString(), StringComparison.Ordinal);
        Assert.True(deep.ToString(int.MaxValue).Length > 10 * Depth);
    });

    [Fact]
    public void Equals_MillionNestedInTwoArenas_IsTrue() => OnSmallStack(() =>
    {
        var worlds = new WorldSpace();
        Lineage deep = Nested(worlds, "a");

        UncertainSet<int> query = from x in worlds.WithLineage([1], _ => deep)
                                  join y in worlds.Independent([1], _ => 0.5) on x equals y
                                  select x;

        // Each query's lineages are in an arena of their own, on top of the world space's, where they are compared.
        Lineage first = Assert.Single(query.Derive()).Lineage;
        Lineage second = Assert.Single(query.Derive()).Lineage;

        Assert.NotSame(first.Arena, second.Arena);
        Assert.Equal(first, second);
        Assert.Equal(first.GetHashCode(), second.GetHashCode());
        Assert.NotEqual(first, !second);
        Assert.NotEqual(first, deep);
    });

    [Fact]
    public void Derive_RecordWithLineage_IsNotCopied() => OnSmallStack(() =>
    {
        var worlds = new WorldSpace();
        Lineage deep = Nested(worlds, "a");

        Lineage derived = Assert.Single(worlds.WithLineage([1], _ => deep).Derive()).Lineage;

        Assert.Same(deep.Arena, derived.Arena);
        Assert.Equal(deep, derived);
    });

    [Fact]
    public void Import_MillionNested_KeepsTheFormula() => OnSmallStack(() =>
    {
        var worlds = new WorldSpace();
        Lineage deep = Nested(worlds, "a");
        var other = new LineageArena(worlds);

        LineageRef copy = other.Import(deep.Arena, deep.Ref);

        Assert.Equal(deep.ToString(10_000), new Lineage(other, copy).ToString(10_000));
        Assert.Equal(deep.Ref, deep.Arena.Import(other, copy));
    });

    [Theory]
    [InlineData("chooser")]
    [InlineData("compilation")]
    [InlineData("sampling")]
    public void Evaluate_MillionNested_DoesNotOverflowTheStack(string evaluator) => OnSmallStack(() =>
    {
        var worlds = new WorldSpace();
        Lineage deep = Nested(worlds, "a");

        Probability probability = deep.Evaluate(new EvaluationOptions
        {
            Evaluator = evaluator switch
            {
                "compilation" => Evaluators.Compilation,
                "sampling" => Evaluators.Sampling,
                _ => Evaluators.Chooser,
            },
            Accuracy = evaluator == "sampling" ? Accuracy.Within(0.05, 1e-12) : Accuracy.Exact,
        });

        // p(k+1) = c (1 - (1 - c)(1 - p(k))), from the innermost part outwards: a contraction with fixed point c^2 / (1 - c + c^2).
        double fixedPoint = 0.25 / 0.75;
        Assert.InRange(fixedPoint, probability.Lower - 1e-12, probability.Upper + 1e-12);
    });

    [Fact]
    public void Query_MillionOfLineagesInOneAnswer_DoesNotOverflowTheStack() => OnSmallStack(() =>
    {
        var worlds = new WorldSpace();
        UncertainSet<int> set = worlds.Independent(Enumerable.Range(0, Depth), i => 1e-6).Select(i => 1);

        Assert.InRange(Assert.Single(set.Evaluate()).Probability.Value, 0.632120, 0.632121);
    });

    /// <summary>e1 ∧ (e2 ∨ (e3 ∧ (e4 ∨ ...))), each event its own, with chance 1/2.</summary>
    private static Lineage Nested(WorldSpace worlds, string name)
    {
        Lineage deep = worlds.Event(name, 0.5);
        Lineage[] events = [.. worlds.Independent(Enumerable.Range(0, Depth), i => 0.5).Derive().Select(record => record.Lineage)];
        for (int i = 0; i < events.Length; i++)
        {
            deep = i % 2 == 0 ? events[i] | deep : events[i] & deep;
        }

        return deep;
    }

    private static void OnSmallStack(Action test)
    {
        Exception? failure = null;
        var thread = new Thread(
            () =>
            {
                try
                {
                    test();
                }
                catch (Exception exception)
                {
                    failure = exception;
                }
            },
            StackBytes);
        thread.Start();
        thread.Join();
        if (failure is not null)
        {
            throw new InvalidOperationException($"On a stack of {StackBytes:N0} bytes: {failure.Message}", failure);
        }
    }
}
