using System.Diagnostics;
using Uncertain.Inference;
using Uncertain.Inference.Compilation;
using Uncertain.Inference.Compilation.Decisions;

namespace Uncertain.Tests.Compilation;

/// <summary>Lineages that are decision circuits already.</summary>
public sealed class DecisionCircuitTests
{
    [Fact]
    public void Compile_RandomDecisions_EqualsEnumeration()
    {
        int taken = 0;
        for (int seed = 0; seed < 3000; seed++)
        {
            Lineage lineage = Decisions(seed, inOrder: seed % 3 != 0);

            Probability compiled = lineage.Compile().Evaluate();

            (double value, double complement) = Enumeration.Of(lineage);
            Assert.True(Math.Abs(value - compiled.Value) <= 1e-12 * value, $"seed {seed}: {lineage}");
            Assert.True(Math.Abs(complement - compiled.Complement) <= 1e-12 * complement, $"seed {seed}: {lineage}");
            taken += IsTaken(lineage) ? 1 : 0;
        }

        Assert.InRange(taken, 500, 2000); // Many are no decisions any more, once constants are simplified, and some are out of order.
    }

    [Fact]
    public void Compile_StatesOfManySteps_IsLinear()
    {
        // The remainder modulo 499 of a weighted sum: no order but that of the steps has few states.
        var worlds = new WorldSpace();
        var random = new Random(1);
        Lineage[] after = [.. Enumerable.Range(0, 499).Select(state => state % 2 == 0 ? worlds.Always : worlds.Never)];
        for (int step = 0; step < 200; step++)
        {
            Lineage x = worlds.Event($"x{step}", random.NextDouble());
            int weight = random.Next(1, 499);
            after = [.. after.Select((no, state) => (x & after[(state + weight) % 499]) | (!x & no))];
        }

        var watch = Stopwatch.StartNew();
        CompiledLineage compiled = after[0].Compile();

        Assert.True(IsTaken(after[0]));
        Assert.InRange(compiled.NodeCount, 50_000, 102_000);
        Assert.InRange(compiled.Evaluate().Value, 0.49, 0.51); // Near uniform: 250 of the 499 states hold.
        Assert.True(watch.Elapsed < TimeSpan.FromSeconds(10), $"took {watch.Elapsed}");
    }

    [Fact]
    public void TryCompile_SelectorInsideItsBranch_IsNotTaken()
    {
        var worlds = new WorldSpace();
        Lineage[] x = [.. Enumerable.Range(0, 4).Select(i => worlds.Event($"x{i}", 0.3))];
        Lineage inner = (x[1] & x[0]) | (!x[1] & x[2]);
        Lineage lineage = (x[0] & (inner ^ x[3])) | (!x[0] & inner);

        (double value, _) = Enumeration.Of(lineage);

        Assert.False(IsTaken(lineage));
        Assert.Equal(value, lineage.Compile().Evaluate().Value, 1e-15);
    }

    /// <summary>Whether the whole lineage, as one module, is taken over.</summary>
    private static bool IsTaken(Lineage lineage)
    {
        if (!lineage.Ref.IsNode)
        {
            return false;
        }

        var options = new EvaluationOptions();
        var budget = new CompilationBudget(options, options.Clock.GetTimestamp(), 0, default);
        var form = new FormBuilder();
        FormulaGraph graph = FormulaGraph.Collect(lineage.Arena, lineage.Ref, form, budget);
        ModuleFormula module = ModuleFormula.Extract(
            graph, graph.Root.Index, new bool[graph.NodeCount + 1], [], new IntMap(16), budget);
        var workspace = new Workspace(graph.Atoms);
        int variables = workspace.NumberVariables(module, budget).Count;
        return new DecisionReader(graph.Atoms, workspace, form, budget).TryCompile(module, variables) is not null;
    }

    private static Lineage Decisions(int seed, bool inOrder)
    {
        var random = new Random(seed);
        var worlds = new WorldSpace();
        Lineage[] x = [.. Enumerable.Range(0, 9).Select(i => worlds.Event($"x{i}", 0.02 + (0.96 * random.NextDouble())))];
        var made = new List<(Lineage Lineage, int Level)> { (worlds.Always, 9), (worlds.Never, 9) };
        for (int level = 8; level >= 0; level--)
        {
            for (int i = random.Next(1, 4); i > 0; i--)
            {
                Lineage selector = random.Next(2) == 0 ? x[level] : !x[level];
                (Lineage then, Lineage otherwise) = (Branch(), Branch());
                made.Add(((selector & then) | (!selector & otherwise), level));
            }
        }

        return made[^1].Lineage;

        Lineage Branch()
        {
            Lineage branch = made[Math.Max(random.Next(made.Count), random.Next(made.Count))].Lineage;
            branch = random.Next(4) == 0 ? !branch : branch;
            return inOrder || random.Next(4) != 0 ? branch : branch & x[random.Next(9)];
        }
    }
}
