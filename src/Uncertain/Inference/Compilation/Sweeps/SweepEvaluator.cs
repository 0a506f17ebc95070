using Uncertain.Lineages;
using Uncertain.Numerics;
using Uncertain.Worlds;

namespace Uncertain.Inference.Compilation.Sweeps;

/// <summary>
/// Exact probabilities of lists of terms in one pass over them, straight from the arena: terms without common variables as they stand,
/// others by a <see cref="TermSweep{TNumber}"/>. Its memory is kept for a thread's next lineage.
/// </summary>
internal sealed class SweepEvaluator
{
    // As for a compiled form: 4096 * 2^-53 = 4.5e-13.
    private const long SafeRoundings = 4096;

    // What a thread keeps; more was one large lineage's.
    private const int KeptTerms = 1 << 16;

    [ThreadStatic]
    private static SweepEvaluator? s_spare;

    private readonly SlotNumbers _seen = new();
    private readonly SharedTerms _terms = new();
    private readonly TermSweep<double> _plain = new();
    private TermSweep<ExtendedDouble>? _extended;
    private Tails<double>[] _chances = [];

    /// <summary>False if the lineage is no list of terms, or they share too many variables for a sweep of at most so much work.</summary>
    public static bool TryEvaluate(
        LineageArena arena, LineageRef root, long mostWork, CancellationToken cancellationToken, out SweepResult result)
    {
        result = default;
        if (!root.IsNode)
        {
            return false;
        }

        // While one is in use there is no spare.
        SweepEvaluator evaluator = s_spare ?? new SweepEvaluator();
        s_spare = null;
        var source = new TermSource(arena, root);
        bool isDone = evaluator.TryIndependent(source, arena.Worlds.Variables, cancellationToken, out result)
            || evaluator.TrySweep(source, arena.Worlds.Variables, mostWork, cancellationToken, out result);
        if (source.Count <= KeptTerms)
        {
            s_spare = evaluator;
        }

        return isDone;
    }

    private bool TryIndependent(TermSource source, VariableTable table, CancellationToken cancellationToken, out SweepResult result)
    {
        result = default;
        if (TermSweep<double>.Roundings(source.Count, 2 * source.Count) > SafeRoundings)
        {
            return false;
        }

        _seen.Clear(2 * source.Count);
        Span<LineageRef> single = stackalloc LineageRef[1];
        Tails<double> any = Tails<double>.Never;
        int read = 0;
        for (int term = 0; term < source.Count; term++)
        {
            cancellationToken.ThrowIfCancellationRequested();
            if (!source.TryRead(term, single, out ReadOnlySpan<LineageRef> literals)
                || TermSweep<double>.Roundings(source.Count, read += literals.Length) > SafeRoundings)
            {
                return false;
            }

            Tails<double> all = Tails<double>.Always;
            foreach (LineageRef literal in literals)
            {
                _seen.NumberOf(literal.Index, out bool isNew);
                if (!isNew)
                {
                    return false;
                }

                all &= TailConversions.FromChance(table.Chance(literal.Index)).NegateIf(literal.IsNegated);
            }

            any |= all;
        }

        result = new SweepResult(any.NegateIf(source.IsNegated), default, source.Count + read);
        return TailConversions.IsInRange(any, isZeroExact: false);
    }

    private bool TrySweep(
        TermSource source, VariableTable table, long mostWork, CancellationToken cancellationToken, out SweepResult result)
    {
        result = default;
        if (!_terms.TryRead(source, cancellationToken) || _terms.Work > Math.Max(mostWork, 4L * _terms.Count))
        {
            return false;
        }

        ReadOnlySpan<int> slots = _terms.Slots.Slots;
        long nodes = slots.Length + _terms.Count;
        if (TermSweep<double>.Roundings(_terms.Count, _terms.LiteralCount) <= SafeRoundings)
        {
            if (_chances.Length < slots.Length)
            {
                _chances = new Tails<double>[2 * slots.Length];
            }

            for (int i = 0; i < slots.Length; i++)
            {
                _chances[i] = TailConversions.FromChance(table.Chance(slots[i]));
            }

            Tails<double> any = _plain.Evaluate(_terms, _chances.AsSpan(0, slots.Length), cancellationToken);
            if (TailConversions.IsInRange(any, isZeroExact: false))
            {
                result = new SweepResult(any.NegateIf(source.IsNegated), default, nodes);
                return true;
            }
        }

        var chances = new Tails<ExtendedDouble>[slots.Length];
        for (int i = 0; i < slots.Length; i++)
        {
            chances[i] = TailConversions.FromChanceExtended(table.Chance(slots[i]));
        }

        _extended ??= new TermSweep<ExtendedDouble>();
        result = new SweepResult(null, _extended.Evaluate(_terms, chances, cancellationToken).NegateIf(source.IsNegated), nodes);
        return true;
    }
}
