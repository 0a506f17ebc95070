using Uncertain.Inference;

namespace Uncertain.Tests.Compilation;

public sealed class CompiledLineageTests
{
    private readonly WorldSpace _worlds = new();

    [Fact]
    public void Evaluate_ChangedChances_UsesThemOnce()
    {
        (Lineage a, Lineage b) = (_worlds.Event("a", 0.5), _worlds.Event("b", 0.25));
        CompiledLineage compiled = (a & b).Compile();

        Probability changed = compiled.Evaluate(new Dictionary<Lineage, double> { [a] = 0.125 });

        Assert.Equal(0.03125, changed.Value);
        Assert.Equal(0.125, compiled.Evaluate().Value);
    }

    [Fact]
    public void Evaluate_ChangedToCertain_IsExact()
    {
        (Lineage a, Lineage b) = (_worlds.Event("a", 0.5), _worlds.Event("b", 0.25));
        CompiledLineage compiled = (a ^ b).Compile();

        Probability changed = compiled.Evaluate(new Dictionary<Lineage, double> { [a] = 1, [b] = 1 });

        Assert.Equal(0, changed.Value);
        Assert.Equal(double.NegativeInfinity, changed.LogValue);
        Assert.Equal(1, changed.Complement);
    }

    [Fact]
    public void Evaluate_ChangedAlternative_GivesTheRestToNoneOfThem()
    {
        IReadOnlyList<Lineage> lots = _worlds.Choice("lot", [0.5, 0.25, 0.25]);
        CompiledLineage compiled = (!(lots[0] | lots[1])).Compile();

        Probability changed = compiled.Evaluate(new Dictionary<Lineage, double> { [lots[0]] = 0.25 });

        Assert.Equal(0.5, changed.Value);
    }

    [Fact]
    public void Evaluate_ChanceOutsideUnitInterval_IsRefused()
    {
        Lineage a = _worlds.Event("a", 0.5);

        var refused = Assert.Throws<InvalidInputException>(
            () => a.Compile().Evaluate(new Dictionary<Lineage, double> { [a] = 1.5 }));

        Assert.Contains("1.5", refused.Message, StringComparison.Ordinal);
    }

    [Fact]
    public void Evaluate_AlternativesAboveOne_AreRefused()
    {
        IReadOnlyList<Lineage> lots = _worlds.Choice("lot", [0.5, 0.25]);

        var refused = Assert.Throws<InvalidInputException>(
            () => lots[0].Compile().Evaluate(new Dictionary<Lineage, double> { [lots[0]] = 0.875 }));

        Assert.Contains("1.125", refused.Message, StringComparison.Ordinal);
    }

    [Fact]
    public void Evaluate_KeyIsNoLiteral_IsRefused()
    {
        Lineage both = _worlds.Event("a", 0.5) & _worlds.Event("b", 0.5);

        Assert.Throws<InvalidInputException>(() => both.Compile().Evaluate(new Dictionary<Lineage, double> { [both] = 0.5 }));
        Assert.Throws<InvalidInputException>(
            () => both.Compile().Evaluate(new Dictionary<Lineage, double> { [!both.Operands[0]] = 0.5 }));
        Assert.Throws<InvalidInputException>(
            () => both.Compile().Evaluate(new Dictionary<Lineage, double> { [_worlds.Always] = 0.5 }));
    }

    [Fact]
    public void Evaluate_KeyOfAnotherWorldSpace_IsRefused()
    {
        Lineage a = _worlds.Event("a", 0.5);
        Lineage other = new WorldSpace().Event("a", 0.5);

        Assert.Throws<WorldSpaceMismatchException>(
            () => a.Compile().Evaluate(new Dictionary<Lineage, double> { [other] = 0.5 }));
    }

    [Fact]
    public void Compile_Constants_HaveOneNode()
    {
        Assert.Equal(1, _worlds.Always.Compile().Evaluate().Value);
        Assert.Equal(0, _worlds.Never.Compile().Evaluate().Value);
        Assert.Equal("compiled lineage: 1 node", _worlds.Never.Compile().ToString());
    }

    [Fact]
    public void Compile_AllPairsOfAProduct_FactorsIntoReadOnceForm()
    {
        // 10,000 terms, but (a0 or ... or a99) and (b0 or ... or b99): one node for each event, two disjunctions, one conjunction.
        Lineage[] a = [.. Enumerable.Range(0, 100).Select(i => _worlds.Event($"a{i}", 0.01))];
        Lineage[] b = [.. Enumerable.Range(0, 100).Select(i => _worlds.Event($"b{i}", 0.02))];

        CompiledLineage compiled = Lineage.Any([.. a.SelectMany(x => b.Select(y => x & y))]).Compile();

        Assert.Equal(1 + 200 + 3, compiled.NodeCount);
        Assert.Equal((1 - Math.Pow(0.99, 100)) * (1 - Math.Pow(0.98, 100)), compiled.Evaluate().Value, 1e-14);
    }

    [Fact]
    public void Compile_ManyOutcomes_AreOneDecision()
    {
        // 1,000 outcomes, of which two occur; an encoding by two-outcome variables would need them all.
        IReadOnlyList<Lineage> lots = _worlds.Choice("lot", [.. Enumerable.Repeat(1.0 / 1024, 1000)]);
        (Lineage x, Lineage y) = (_worlds.Event("x", 0.5), _worlds.Event("y", 0.25));

        CompiledLineage compiled = ((lots[3] & x) | (lots[700] & y)).Compile();

        Assert.True(compiled.NodeCount <= 6, compiled.ToString());
        Assert.Equal((0.5 + 0.25) / 1024, compiled.Evaluate().Value, 1e-16);
    }

    [Fact]
    public void Evaluate_ByCompilation_SaysHow()
    {
        Probability probability = Evaluators.Compilation.Evaluate(
            _worlds.Event("a", 0.5) & _worlds.Event("b", 0.5), EvaluationOptions.Default, default);

        Assert.Equal(GuaranteeKind.Exact, probability.Guarantee.Kind);
        Assert.Equal("compilation", probability.Evaluator);
        Assert.Equal(4, probability.Cost.Nodes);
        Assert.Null(probability.Shortfall);
    }
}
