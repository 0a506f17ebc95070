using Uncertain.Tests.Compilation;
using Uncertain.Tests.Numerics;

namespace Uncertain.Tests.Bounds;

/// <summary>The probability of a lineage of two-outcome variables by adding up all worlds without rounding.</summary>
internal static class RationalEnumeration
{
    public static (BigRational Value, BigRational Complement) Of(Lineage lineage)
    {
        ChanceVariable[] variables = [.. Variables(lineage)];
        (BigRational yes, BigRational no) = (BigRational.Zero, BigRational.Zero);
        var outcome = new Dictionary<int, int>();
        for (int world = 0; world < 1 << variables.Length; world++)
        {
            BigRational chance = BigRational.One;
            for (int i = 0; i < variables.Length; i++)
            {
                var own = BigRational.From(variables[i].ChanceOf(0));
                bool holds = (world >> i & 1) != 0;
                chance *= holds ? own : BigRational.One - own;
                outcome[variables[i].Index] = holds ? 0 : -1;
            }

            if (Enumeration.Holds(lineage, outcome))
            {
                yes += chance;
            }
            else
            {
                no += chance;
            }
        }

        return (yes, no);
    }

    private static HashSet<ChanceVariable> Variables(Lineage lineage)
    {
        var variables = new HashSet<ChanceVariable>();
        var seen = new HashSet<Lineage>();
        var pending = new Stack<Lineage>([lineage]);
        while (pending.TryPop(out Lineage part))
        {
            if (part.Kind == LineageKind.Literal)
            {
                variables.Add(part.Variable);
            }

            foreach (Lineage operand in part.Operands.Where(seen.Add))
            {
                pending.Push(operand);
            }
        }

        return variables;
    }
}
