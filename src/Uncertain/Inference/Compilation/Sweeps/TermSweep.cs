using System.Numerics;
using Uncertain.Numerics;

namespace Uncertain.Inference.Compilation.Sweeps;

/// <summary>
/// The probability of a disjunction of terms in one pass over them. The worlds in which no term so far holds are kept by the values of
/// the open variables: those that a term before and one to come share. A term takes its part of the worlds where its open literals
/// hold; a variable is summed out after its last term.
/// </summary>
/// <remarks>
/// <para>Dynamic programming over a path decomposition of the terms (H. L. Bodlaender, "A tourist guide through treewidth", Acta
/// Cybernetica 11, 1993, section 4). Cost: the sum over the terms of 2^(variables open).</para>
/// <para>Both tails are sums of products of non-negative numbers, so that their relative error is at most the number of operations on a
/// way through them: <see cref="Roundings"/>.</para>
/// </remarks>
internal sealed class TermSweep<TNumber>
    where TNumber : struct, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
        IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>
{
    private readonly TNumber[] _mass = new TNumber[1 << SharedTerms.MostOpen];
    private readonly int[] _open = new int[SharedTerms.MostOpen];
    private int[] _left = [];
    private int _openCount;

    /// <summary>Most roundings that a tail takes.</summary>
    public static long Roundings(int terms, int literals) => (4L * literals) + (2L * terms);

    /// <param name="terms">The terms in an order.</param>
    /// <param name="chances">Of each variable.</param>
    /// <param name="cancellationToken">Looked at for each term.</param>
    public Tails<TNumber> Evaluate(SharedTerms terms, ReadOnlySpan<Tails<TNumber>> chances, CancellationToken cancellationToken)
    {
        if (_left.Length < chances.Length)
        {
            _left = new int[2 * chances.Length];
        }

        for (int variable = 0; variable < chances.Length; variable++)
        {
            _left[variable] = terms.Uses(variable);
        }

        _openCount = 0;
        _mass[0] = TNumber.MultiplicativeIdentity;
        TNumber taken = TNumber.AdditiveIdentity;
        foreach (int term in terms.Order)
        {
            cancellationToken.ThrowIfCancellationRequested();
            ReadOnlySpan<int> literals = terms.Term(term);
            Tails<TNumber> own = Tails<TNumber>.Always;
            int mask = 0;
            int wanted = 0;
            foreach (int literal in literals)
            {
                int variable = literal >> 1;
                if (terms.Uses(variable) == 1)
                {
                    own &= chances[variable].NegateIf((literal & 1) != 0);
                }
                else
                {
                    int bit = 1 << PlaceOf(variable, chances);
                    mask |= bit;
                    wanted |= (literal & 1) == 0 ? bit : 0;
                }
            }

            taken += Take(mask, wanted, own);
            foreach (int literal in literals)
            {
                if (--_left[literal >> 1] == 0 && terms.Uses(literal >> 1) > 1)
                {
                    Close(literal >> 1);
                }
            }
        }

        return new Tails<TNumber>(taken, _mass[0]);
    }

    // The part of the worlds where the bits are as wanted in which a term's own literals hold.
    private TNumber Take(int mask, int wanted, Tails<TNumber> own)
    {
        TNumber[] mass = _mass;
        TNumber taken = TNumber.AdditiveIdentity;
        int states = 1 << _openCount;
        for (int state = wanted; state < states; state = ((state | mask) + 1) & ~mask | wanted)
        {
            taken += mass[state];
            mass[state] *= own.False;
        }

        return taken * own.True;
    }

    private int PlaceOf(int variable, ReadOnlySpan<Tails<TNumber>> chances)
    {
        int place = _open.AsSpan(0, _openCount).IndexOf(variable);
        if (place >= 0)
        {
            return place;
        }

        TNumber[] mass = _mass;
        Tails<TNumber> chance = chances[variable];
        int states = 1 << _openCount;
        for (int state = 0; state < states; state++)
        {
            mass[state + states] = mass[state] * chance.True;
            mass[state] *= chance.False;
        }

        _open[_openCount] = variable;
        return _openCount++;
    }

    private void Close(int variable)
    {
        int place = _open.AsSpan(0, _openCount).IndexOf(variable);
        TNumber[] mass = _mass;
        int bit = 1 << place;
        int states = 1 << _openCount;
        int written = 0;
        for (int block = 0; block < states; block += 2 * bit)
        {
            for (int state = block; state < block + bit; state++)
            {
                mass[written++] = mass[state] + mass[state + bit];
            }
        }

        _openCount--;
        _open.AsSpan(place + 1, _openCount - place).CopyTo(_open.AsSpan(place));
    }
}
