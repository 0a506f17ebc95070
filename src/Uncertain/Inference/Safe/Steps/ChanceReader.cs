using System.Numerics;
using System.Runtime.CompilerServices;
using Uncertain.Numerics;
using Uncertain.Worlds;

namespace Uncertain.Inference.Safe.Steps;

/// <summary>Chances in one of the two number types.</summary>
internal static class ChanceReader<TNumber>
    where TNumber : unmanaged, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
        IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>
{
    /// <summary>Both tails of a chance.</summary>
    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static Tails<TNumber> OfChance(double chance) => typeof(TNumber) == typeof(double)
        ? Unsafe.BitCast<Tails<double>, Tails<TNumber>>(TailConversions.FromChance(chance))
        : Unsafe.BitCast<Tails<ExtendedDouble>, Tails<TNumber>>(TailConversions.FromChanceExtended(chance));

    /// <summary>The chance that a variable takes none of its outcomes with a slot.</summary>
    public static TNumber OfNone(VariableTable table, int variable) => typeof(TNumber) == typeof(double)
        ? Unsafe.BitCast<double, TNumber>(table.NoneChance(variable))
        : Unsafe.BitCast<ExtendedDouble, TNumber>(table.NoneChanceExtended(variable));
}
