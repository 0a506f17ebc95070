using System.Numerics;
using Uncertain.Numerics;
using Uncertain.Worlds;

namespace Uncertain.Inference.Safe.Steps;

/// <summary>Reads chances from the variable table in one number type.</summary>
/// <param name="Variables">The table.</param>
/// <param name="OfChance">Both tails of a chance.</param>
/// <param name="OfNone">The chance that a variable takes none of its outcomes with a slot.</param>
internal sealed record ChanceReader<TNumber>(VariableTable Variables, Func<double, Tails<TNumber>> OfChance, Func<int, TNumber> OfNone)
    where TNumber : struct, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
        IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>
{
    /// <summary>The chance of a slot.</summary>
    public TNumber OfSlot(int slot) => OfChance(Variables.Chance(slot)).True;
}
