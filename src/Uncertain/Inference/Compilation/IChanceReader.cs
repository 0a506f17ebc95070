using System.Numerics;
using Uncertain.Numerics;

namespace Uncertain.Inference.Compilation;

/// <summary>Hands the chances of a setting to a forward pass, in the kind of number that it computes with.</summary>
internal interface IChanceReader<TNumber>
    where TNumber : struct, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
        IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>
{
    /// <summary>Both tails of one outcome.</summary>
    Tails<TNumber> Literal(int slot);

    /// <summary>The chances of the listed outcomes and, last, of all others together.</summary>
    TNumber[] Weights(FormDistribution distribution);

    /// <summary>Whether the number may have lost digits because it is near the end of its range.</summary>
    bool IsOutOfRange(Tails<TNumber> tails);

    /// <summary>The same for one number.</summary>
    bool IsOutOfRange(TNumber number);
}
