using System.Numerics;
using Uncertain.Numerics;

namespace Uncertain.Inference.Compilation;

/// <summary>What one forward and one backward pass over a form give.</summary>
/// <param name="Whole">Both tails of the whole formula.</param>
/// <param name="Slots">The outcomes that the form contains, each once.</param>
/// <param name="OfSlot">
/// For each of them the derivative of the chance of the whole by the chance of the outcome, the other outcomes of its variable
/// unchanged and 'none of them' taking the rest.
/// </param>
internal sealed record FormDerivatives<TNumber>(Tails<TNumber> Whole, int[] Slots, Difference<TNumber>[] OfSlot)
    where TNumber : struct, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
        IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>;
