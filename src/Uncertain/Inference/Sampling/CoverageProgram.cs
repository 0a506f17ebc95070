using Uncertain.Lineages;
using Uncertain.Worlds;

namespace Uncertain.Inference.Sampling;

/// <summary>A disjunction made ready for coverage sampling; shared by all threads.</summary>
internal sealed class CoverageProgram
{
    private readonly VariableTable _variables;
    private readonly int[] _starts;
    private readonly int[] _variableOfRow;
    private readonly AliasTable _choice;
    private readonly SplitMixStream _choices;

    /// <param name="variables">The chances.</param>
    /// <param name="terms">The disjunction; at least one term.</param>
    /// <param name="seed">Seed of the worlds.</param>
    /// <param name="budget">If it ends, the work is left unfinished.</param>
    public CoverageProgram(VariableTable variables, Terms terms, ulong seed, WorkBudget budget)
    {
        _variables = variables;
        Draws = new Draws(variables, terms.Slots, seed, budget);
        _choices = SplitMixStream.Of(seed, StreamKeys.Term);
        _variableOfRow = new int[Draws.RowCount];
        for (int variable = 0; variable < Draws.VariableCount; variable++)
        {
            _variableOfRow.AsSpan(Draws.FirstRow(variable)..Draws.EndRow(variable)).Fill(variable);
        }

        // Weights in parts of the largest: their products may be far below the range of doubles.
        double[] weights = [.. terms.LogWeights.Select(log => Math.Exp(log - terms.LargestLogWeight))];
        _choice = new AliasTable(weights);
        var code = new List<int>();
        _starts = new int[terms.Count + 1];
        for (int term = 0; term < terms.Count && !((term & 0xFFF) == 0 && budget.HasEnded); term++)
        {
            _starts[term] = code.Count;
            code.Add(terms[term].Length);
            foreach (LineageRef literal in terms[term])
            {
                code.Add((Draws.RowOf(literal.Index) << 1) | (literal.IsNegated ? 1 : 0));
            }
        }

        _starts[^1] = code.Count;
        Code = [.. code];
    }

    public Draws Draws { get; }

    /// <summary>The terms, the most probable first; see <see cref="GateKernel"/>.</summary>
    public int[] Code { get; }

    public int TermCount => _starts.Length - 1;

    /// <summary>Vector operations that 512 worlds cost, roughly.</summary>
    public long Work => (Draws.WorkPerRow * Draws.RowCount) + Code.Length;

    public int VariableOf(int row) => _variableOfRow[row];

    /// <summary>The term chosen in a world, each with its part of the total weight.</summary>
    public int Choose(long world) => _choice.Pick(_choices.Word((ulong)world));

    /// <summary>The part of <see cref="Code"/> from one term to before another.</summary>
    public ReadOnlySpan<int> Between(int term, int end) => Code.AsSpan(_starts[term].._starts[end]);

    /// <summary>The operands of a term.</summary>
    public ReadOnlySpan<int> Operands(int term) => Code.AsSpan((_starts[term] + 1).._starts[term + 1]);

    /// <summary>
    /// The outcome of a many-outcome variable in a world, given that some outcomes are ruled out: a row, or -1 for none that has one.
    /// </summary>
    /// <param name="ruledOut">Operands of the outcomes that are ruled out, ascending.</param>
    /// <param name="world">Number of the world.</param>
    public int DrawRemaining(ReadOnlySpan<int> ruledOut, long world)
    {
        int variable = _variableOfRow[ruledOut[0] >> 1];
        int firstRow = Draws.FirstRow(variable);
        int rows = Draws.EndRow(variable) - firstRow;
        int firstSlot = Draws.SlotOf(firstRow);
        int owner = _variables.VariableOf(firstSlot);
        int outcomes = _variables.OutcomeCount(owner);

        double total = _variables.NoneChance(owner);
        for (int pass = 0; ; pass++)
        {
            double target = pass == 0
                ? double.PositiveInfinity
                : total * SplitMixStream.Of(Draws.Seed, StreamKeys.Remaining(firstSlot)).Fraction((ulong)world);
            double sum = 0;
            int next = 0;
            int last = -1;
            for (int outcome = 0; outcome < outcomes; outcome++)
            {
                if (next < ruledOut.Length && ruledOut[next] >> 1 == firstRow + outcome)
                {
                    next++;
                    continue;
                }

                sum += _variables.Chance(firstSlot + outcome);
                last = outcome;
                if (sum > target)
                {
                    return outcome < rows ? firstRow + outcome : -1;
                }
            }

            if (pass == 1)
            {
                // Nothing but rounding leads here when 'none of them' is impossible.
                return _variables.NoneChance(owner) > 0 || last >= rows || last < 0 ? -1 : firstRow + last;
            }

            total += sum;
        }
    }
}
