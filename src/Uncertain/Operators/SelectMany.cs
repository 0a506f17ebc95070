using System.Linq.Expressions;
using Uncertain.Execution;
using Uncertain.Lineages;
using Uncertain.Planning;
using Uncertain.Planning.Calculus;

namespace Uncertain;

/// <content>Products: several <c>from</c> clauses.</content>
public partial class UncertainSet<T>
{
    /// <summary>
    /// For each element all elements of a set that may depend on it; a result is there where both are. A set that depends on the element
    /// by a filter only is run once, and joined where the filter is an equality; one that depends on it in another way is run for each
    /// element.
    /// </summary>
    /// <param name="collectionSelector">The set for an element, of the same world space.</param>
    /// <param name="resultSelector">The result for a pair.</param>
    public UncertainSet<TResult> SelectMany<TCollection, TResult>(
        Expression<Func<T, UncertainSet<TCollection>>> collectionSelector, Expression<Func<T, TCollection, TResult>> resultSelector) =>
        DependentSet.TryFlatten(this, collectionSelector, resultSelector)
            ?? new UncertainSet<TResult>(new SelectManyNode<TCollection, TResult>(Node, collectionSelector, resultSelector));

    /// <summary>For each element all elements of a set that may depend on it; see the other overload.</summary>
    /// <param name="selector">The set for an element, of the same world space.</param>
    public UncertainSet<TResult> SelectMany<TResult>(Expression<Func<T, UncertainSet<TResult>>> selector) =>
        SelectMany(selector, (element, result) => result);

    private sealed class SelectManyNode<TCollection, TResult> : PlanNode<TResult>
    {
        private readonly PlanNode<T> _input;
        private readonly PlanNode<TCollection>? _fixed;
        private readonly Lambda<T, UncertainSet<TCollection>> _collection;
        private readonly Lambda<T, TCollection, TResult> _result;

        public SelectManyNode(
            PlanNode<T> input, Expression<Func<T, UncertainSet<TCollection>>> collectionSelector,
            Expression<Func<T, TCollection, TResult>> resultSelector)
            : this(input, DependentSet.Fixed(collectionSelector), collectionSelector, resultSelector)
        {
        }

        private SelectManyNode(
            PlanNode<T> input, UncertainSet<TCollection>? fixedSet, Expression<Func<T, UncertainSet<TCollection>>> collectionSelector,
            Expression<Func<T, TCollection, TResult>> resultSelector)
            : base(input.Worlds, fixedSet is null ? [input] : [input, fixedSet.Node])
        {
            HasOneTranslation &= fixedSet is not null;
            _input = input;
            _fixed = fixedSet is null ? null : SameWorlds.Require(input.Worlds, fixedSet, nameof(SelectMany));
            _collection = new Lambda<T, UncertainSet<TCollection>>(collectionSelector, nameof(SelectMany));
            _result = new Lambda<T, TCollection, TResult>(resultSelector, nameof(SelectMany));
        }

        public override string Describe() => _fixed is null
            ? $"for each element: {PlanText.Lambda(_collection.Tree)}{PlanText.Into(_result.Tree)}"
            : $"product{PlanText.Into(_result.Tree)}";

        public override Flow<TResult> Start(QueryRun run)
        {
            Flow<T> outer = _input.Start(run);
            if (_fixed is null)
            {
                return outer.Then<TResult>(LineageForm.Any, addsNodes: true, next => new DependentSink(this, run, outer.Lineages, next));
            }

            RecordList<TCollection> inner = RecordList<TCollection>.Read(_fixed, run);
            LineageForm form = LineageForm.Both(outer.Lineages, inner.Form);
            return outer.Then<TResult>(form, addsNodes: !form.IsTerm, next => new ProductSink(
                inner, new PairOutput<T, TCollection, TResult>(run, outer.Lineages, inner, form, _result, next)));
        }

        public override PlanNode<TResult>? TryJoin(Expression<Func<TResult, bool>> condition)
        {
            if (_fixed is null || ProductKeys.Find(_result.Tree, condition) is not var (outer, inner))
            {
                return null;
            }

            // The key's type is known only now.
            return (PlanNode<TResult>)((Func<JoinSide, JoinSide, PlanNode<TResult>>)JoinOn<object>).Method
                .GetGenericMethodDefinition()
                .MakeGenericMethod(outer.Key.ReturnType)
                .Invoke(this, [outer, inner])!;
        }

        public override Conjunction Translate()
        {
            Conjunction outer = _input.Translate();
            Conjunction inner = _fixed?.Translate() ?? DependentSet.Translate(outer.Apply(_collection.Tree));
            return outer.And(inner) with { Value = Substitution.Apply(_result.Tree, outer.Value, inner.Value) };
        }

        private JoinNode<TCollection, TKey, TResult> JoinOn<TKey>(JoinSide outer, JoinSide inner) => new(
            new JoinInputs<T, TCollection, TKey>(
                Filtered(_input, outer).Node, Filtered(_fixed!, inner), (Expression<Func<T, TKey>>)outer.Key,
                (Expression<Func<TCollection, TKey>>)inner.Key, null, nameof(SelectMany)),
            _result.Tree);

        private static UncertainSet<TValue> Filtered<TValue>(PlanNode<TValue> input, JoinSide side)
        {
            var set = new UncertainSet<TValue>(input);
            return side.Filter is null ? set : set.Where((Expression<Func<TValue, bool>>)side.Filter);
        }

        private PlanNode<TCollection> SetFor(T value) => SameWorlds.Require(
            Worlds,
            _collection.Invoke(value) ?? throw new InvalidInputException(
                $"The lambda '{PlanText.Lambda(_collection.Tree)}' of SelectMany gave null for '{value}'. Give an empty set instead, "
                + "for example WorldSpace.Certain of no records."),
            nameof(SelectMany));

        private sealed class ProductSink(RecordList<TCollection> inner, PairOutput<T, TCollection, TResult> output) : Sink<T>
        {
            public override void Take(Batch<T> batch)
            {
                output.Begin(batch);
                for (int i = 0; i < batch.Count; i++)
                {
                    for (int position = 0; position < inner.Count; position++)
                    {
                        if (inner.IsPossible(position))
                        {
                            output.Add(i, position);
                        }
                    }
                }

                output.Send();
            }
        }

        /// <summary>Runs a set for each element.</summary>
        private sealed class DependentSink(
            SelectManyNode<TCollection, TResult> node, QueryRun run, LineageForm outer, Sink<TResult> next) : Sink<T>
        {
            public override void Take(Batch<T> batch)
            {
                for (int i = 0; i < batch.Count; i++)
                {
                    RecordList<TCollection> inner = RecordList<TCollection>.Read(node.SetFor(batch.Values[i]), run);
                    var output = new PairOutput<T, TCollection, TResult>(run, outer, inner, LineageForm.Any, node._result, next);
                    output.Begin(batch);
                    for (int position = 0; position < inner.Count; position++)
                    {
                        if (inner.IsPossible(position))
                        {
                            output.Add(i, position);
                        }
                    }

                    output.Send();
                }
            }
        }
    }
}
