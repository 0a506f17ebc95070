using Uncertain.Inference.Compilation;
using Uncertain.Lineages;
using Uncertain.Numerics;
using Uncertain.Worlds;

namespace Uncertain.Inference.Aggregates;

/// <summary>Probabilities of single lineages with the digits that sums of a million of them need.</summary>
internal sealed class LineageTails(LineageArena arena, AggregateBudget budget)
{
    private readonly VariableTable _variables = arena.Worlds.Variables;
    private readonly ChanceSetting _chances = new(arena.Worlds.Variables);

    /// <exception cref="BudgetSpentException">Compiling the lineage went over the budget.</exception>
    public Tails<ExtendedDouble> Of(LineageRef lineage)
    {
        budget.Step(5);
        return (lineage.IsNode ? OfNode(lineage.Index) : OfPlain(lineage.Positive)).NegateIf(lineage.IsNegated);
    }

    private Tails<ExtendedDouble> OfPlain(LineageRef lineage) => lineage switch
    {
        { IsConstant: true } => Tails<ExtendedDouble>.Always,
        _ when _variables.IsAlternative(lineage.Index) => _chances.Alternative(lineage.Index),
        _ => TailConversions.FromChanceExtended(_variables.Chance(lineage.Index)),
    };

    private Tails<ExtendedDouble> OfNode(int index)
    {
        // The arena has dropped repeats, so different literals of two-outcome variables are independent.
        Tails<ExtendedDouble> all = Tails<ExtendedDouble>.Always;
        foreach (LineageRef operand in arena.Operands(index))
        {
            if (!operand.IsLiteral || _variables.IsAlternative(operand.Index))
            {
                return Compiled(index);
            }

            budget.Step(3);
            all &= OfPlain(operand.Positive).NegateIf(operand.IsNegated);
        }

        return all;
    }

    private Tails<ExtendedDouble> Compiled(int index)
    {
        CompiledForm form = LineageCompiler.Compile(arena, LineageRef.Node(index), budget.Compilation);
        ForwardPass<ExtendedDouble, ExtendedChances>.TryEvaluate(form, new ExtendedChances(_chances), out Tails<ExtendedDouble> tails);
        return tails;
    }
}
