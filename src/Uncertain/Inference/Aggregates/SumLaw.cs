using Uncertain.Lineages;
using Uncertain.Numerics;
using Uncertain.Worlds;

namespace Uncertain.Inference.Aggregates;

/// <summary>
/// The exact law of a sum of weights that count where their lineages hold: independent parts apart, each by decisions on the variables
/// that its lineages share, and then convolved.
/// </summary>
/// <remarks>
/// A part whose lineages share variables is a residual sum; deciding a variable leaves residual sums with fewer of them, whose parts
/// are again independent. Equal residuals are computed once: this is a decision diagram over all the lineages at once with a
/// law at each node (as generating functions on compiled forms: A. Darwiche, "A differential approach to inference in Bayesian networks",
/// Journal of the ACM 50, 2003). The cost grows with the width of the shared variables, not with the number of records.
/// </remarks>
internal sealed class SumLaw
{
    private readonly LineageArena _arena;
    private readonly AggregateBudget _budget;
    private readonly VariableTable _variables;
    private readonly LineageTails _tails;
    private readonly SharedParts _parts;
    private readonly Decider _decider;
    private readonly Dictionary<Residual, Law> _known = [];
    private readonly Stack<Frame> _frames = new();
    private Dictionary<int, int> _ranks = [];

    public SumLaw(LineageArena arena, AggregateBudget budget)
    {
        _arena = arena;
        _budget = budget;
        _variables = arena.Worlds.Variables;
        _tails = new LineageTails(arena, budget);
        _parts = new SharedParts(arena, budget);
        _decider = new Decider(arena, budget);
    }

    /// <summary>The law of the sum.</summary>
    /// <exception cref="Compilation.BudgetSpentException">A budget ran out.</exception>
    public Law Of(ReadOnlySpan<Contribution> contributions)
    {
        Residual sum = Residual.Of(contributions, out long offset);
        var single = new Dictionary<long, List<Tails<ExtendedDouble>>>();
        var laws = new List<Law>();
        if (Array.TrueForAll(sum.Lineages, lineage => lineage.IsLiteral && !_variables.IsAlternative(lineage.Index)))
        {
            // Different literals of two-outcome variables: each is a part of its own.
            for (int i = 0; i < sum.Count; i++)
            {
                AddSingle(sum, i);
            }
        }
        else
        {
            foreach (List<int> part in _parts.Of(sum.Lineages))
            {
                if (part.Count == 1)
                {
                    AddSingle(sum, part[0]);
                }
                else
                {
                    laws.Add(OfPart(sum.Part(part)));
                }
            }
        }

        // Equal weights together: their number is a count.
        foreach ((long weight, List<Tails<ExtendedDouble>> events) in single.OrderBy(entry => entry.Key))
        {
            long sure = events.RemoveAll(tails => tails.False.IsZero);
            events.RemoveAll(tails => tails.True.IsZero);
            laws.Add(PoissonBinomial.Of([.. events], _budget).Map(weight, checked(weight * sure)));
        }

        return Convolution.Of(laws, _budget).Map(1, offset);

        void AddSingle(Residual of, int place)
        {
            if (!single.TryGetValue(of.Weights[place], out List<Tails<ExtendedDouble>>? events))
            {
                single.Add(of.Weights[place], events = []);
            }

            events.Add(_tails.Of(of.Lineages[place]));
        }
    }

    private Law OfPart(Residual part)
    {
        if (Simple(part) is { } simple)
        {
            return simple;
        }

        _ranks = DecisionOrdering.Of(_arena, part.Lineages, _budget);
        _frames.Push(Open(part));
        while (true)
        {
            Frame frame = _frames.Peek();
            if (frame.Next < frame.Children.Length)
            {
                Residual child = frame.Children[frame.Next];
                if (!_known.TryGetValue(child, out Law? law))
                {
                    law = Simple(child);
                    if (law is null)
                    {
                        _frames.Push(Open(child));
                        continue;
                    }
                }

                frame.Laws[frame.Next] = law.Map(1, frame.Offsets[frame.Next]);
                frame.Next++;
                continue;
            }

            Law result = frame.Chances is null ? Convolution.Of(frame.Laws, _budget) : Mix(frame.Chances, frame.Laws);
            _budget.State(result.Count);
            _known[frame.Sum] = result;
            _frames.Pop();
            if (_frames.Count == 0)
            {
                return result;
            }
        }
    }

    // The law of a sum that needs no decision, or null.
    private Law? Simple(Residual sum)
    {
        if (sum.Count < 2)
        {
            return sum.Count == 0 ? Law.Zero : Law.Of(sum.Weights[0], _tails.Of(sum.Lineages[0]));
        }

        if (!sum.Lineages[0].IsLiteral || !_variables.IsAlternative(sum.Lineages[0].Index))
        {
            return null;
        }

        // All of them alternatives of one variable: exclusive.
        int variable = _variables.VariableOf(sum.Lineages[0].Index);
        if (!Array.TrueForAll(sum.Lineages, lineage => lineage.IsLiteral && _variables.VariableOf(lineage.Index) == variable))
        {
            return null;
        }

        int first = _variables.FirstSlot(variable);
        var chances = new double[_variables.OutcomeCount(variable)];
        _variables.Chances(first, chances);
        var masses = new Dictionary<long, ExtendedDouble> { [0] = VariableTable.Remainder(chances) };
        for (int i = 0; i < chances.Length; i++)
        {
            int place = Array.IndexOf(sum.Lineages, LineageRef.Literal(first + i));
            long weight = place < 0 ? 0 : sum.Weights[place];
            masses[weight] = masses.GetValueOrDefault(weight) + ExtendedDouble.From(chances[i]);
        }

        return Law.Of(masses);
    }

    private Frame Open(Residual sum)
    {
        List<List<int>> parts = _parts.Of(sum.Lineages);
        if (parts.Count > 1)
        {
            return new Frame(sum, [.. parts.Select(sum.Part)], new long[parts.Count], null);
        }

        int variable = _decider.First(sum.Lineages, _ranks, out int[] nodes, out int[] slots);
        (ExtendedDouble Chance, Contribution[] Sum)[] cases =
            [.. _decider.Cases(sum, variable, nodes, slots).Where(one => !one.Chance.IsZero)];
        var children = new Residual[cases.Length];
        var offsets = new long[cases.Length];
        for (int i = 0; i < cases.Length; i++)
        {
            children[i] = Residual.Of(cases[i].Sum, out offsets[i]);
        }

        return new Frame(sum, children, offsets, Array.ConvertAll(cases, one => one.Chance));
    }

    private Law Mix(ExtendedDouble[] chances, Law[] laws)
    {
        var masses = new Dictionary<long, ExtendedDouble>();
        double blur = 0;
        for (int i = 0; i < laws.Length; i++)
        {
            _budget.Step(10L * laws[i].Count);
            blur += chances[i].ToDouble() * (laws[i].Blur + laws[i].Omitted);
            for (int j = 0; j < laws[i].Count; j++)
            {
                long key = laws[i].Keys[j];
                masses[key] = masses.GetValueOrDefault(key) + (chances[i] * laws[i].Masses[j]);
            }
        }

        Law law = Law.Of(masses);
        return blur == 0 ? law : new Law(law.Keys, law.Masses, 0, blur);
    }

    private sealed class Frame(Residual sum, Residual[] children, long[] offsets, ExtendedDouble[]? chances)
    {
        public Residual Sum { get; } = sum;

        public Residual[] Children { get; } = children;

        public long[] Offsets { get; } = offsets;

        public ExtendedDouble[]? Chances { get; } = chances;

        public Law[] Laws { get; } = new Law[children.Length];

        public int Next { get; set; }
    }
}
