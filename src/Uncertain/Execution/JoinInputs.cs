using System.Linq.Expressions;
using Uncertain.Lineages;
using Uncertain.Planning;
using Uncertain.Planning.Calculus;

namespace Uncertain.Execution;

/// <summary>The two sides of a join and their keys: what all kinds of join have in common.</summary>
internal sealed class JoinInputs<TOuter, TInner, TKey>
{
    private readonly Lambda<TOuter, TKey> _outerKey;
    private readonly Lambda<TInner, TKey> _innerKey;
    private readonly IEqualityComparer<TKey>? _comparer;
    private readonly string _operatorName;

    public JoinInputs(
        PlanNode<TOuter> outer, UncertainSet<TInner> inner, Expression<Func<TOuter, TKey>> outerKey,
        Expression<Func<TInner, TKey>> innerKey, IEqualityComparer<TKey>? comparer, string operatorName)
    {
        ArgumentNullException.ThrowIfNull(inner);
        Outer = outer;
        Inner = SameWorlds.Require(outer.Worlds, inner, operatorName);
        _outerKey = new Lambda<TOuter, TKey>(outerKey, operatorName);
        _innerKey = new Lambda<TInner, TKey>(innerKey, operatorName);
        _comparer = comparer;
        _operatorName = operatorName;
    }

    public PlanNode<TOuter> Outer { get; }

    public PlanNode<TInner> Inner { get; }

    public string Describe() =>
        $"on {PlanText.Lambda(_outerKey.Tree)} equals {PlanText.Lambda(_innerKey.Tree)}"
        + (_comparer is null ? "" : $", compared by {PlanText.TypeName(_comparer.GetType())}");

    public HashIndex<TKey, TInner> Index(QueryRun run) => HashIndex<TKey, TInner>.Build(Inner, _innerKey, _comparer, run);

    /// <summary>For one worker: the matches of outer records.</summary>
    public Matcher<TOuter, TInner, TKey> Matcher(HashIndex<TKey, TInner> index, QueryRun run) => new(_outerKey, index, run);

    /// <summary>The outer records in the worlds where they have a match, or where they have none.</summary>
    public Flow<TOuter> StartCondition(QueryRun run, bool isNegated)
    {
        HashIndex<TKey, TInner> index = Index(run);
        Matcher<TOuter, TInner, TKey> matcher = Matcher(index, run);
        return ConditionSink<TOuter>.Apply(Outer.Start(run), run, (batch, worlds) =>
        {
            ReadOnlySpan<int> first = matcher.First(batch);
            for (int i = 0; i < first.Length; i++)
            {
                worlds[i] = index.Any(first[i], run.Arena).NegateIf(isNegated);
            }
        });
    }

    /// <summary>Both sides joined on the keys; the value is the outer one's, the inner value is given beside it.</summary>
    public (Conjunction Joined, Expression InnerValue) Translate()
    {
        Conjunction outer = Outer.Translate();
        Conjunction inner = Inner.Translate();
        return (outer.JoinedWith(inner, OuterKey(outer), inner.Apply(_innerKey.Tree), nullsMatch: false), inner.Value);
    }

    /// <summary>The outer side without the rows that have a match.</summary>
    public Conjunction TranslateWithout()
    {
        Conjunction outer = Outer.Translate();
        Conjunction inner = Inner.Translate();
        return outer.Without(inner, OuterKey(outer), inner.Apply(_innerKey.Tree), nullsMatch: false);
    }

    private Expression OuterKey(Conjunction outer) => _comparer is null
        ? outer.Apply(_outerKey.Tree)
        : throw new NoSafePlanException(
            $"{_operatorName} compares keys by {PlanText.TypeName(_comparer.GetType())}, and a safe plan needs equal values; "
            + "join on a normalised key instead");
}
