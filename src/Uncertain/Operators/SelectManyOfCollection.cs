using System.Linq.Expressions;
using Uncertain.Execution;
using Uncertain.Planning;
using Uncertain.Planning.Calculus;

namespace Uncertain;

/// <content>Elements of collections inside the elements.</content>
public partial class UncertainSet<T>
{
    /// <summary>For each element the items of an ordinary collection, which are there where the element is. Linear.</summary>
    /// <param name="collectionSelector">The collection for an element, for example one of its fields; not null.</param>
    /// <param name="resultSelector">The result for an element and an item.</param>
    public UncertainSet<TResult> SelectMany<TCollection, TResult>(
        Expression<Func<T, IEnumerable<TCollection>>> collectionSelector, Expression<Func<T, TCollection, TResult>> resultSelector) =>
        new(new SelectItemsNode<TCollection, TResult>(Node, collectionSelector, resultSelector));

    /// <summary>For each element the items of an ordinary collection, which are there where the element is. Linear.</summary>
    /// <param name="selector">The collection for an element; not null.</param>
    public UncertainSet<TResult> SelectMany<TResult>(Expression<Func<T, IEnumerable<TResult>>> selector) =>
        SelectMany(selector, (element, result) => result);

    private sealed class SelectItemsNode<TCollection, TResult>(
        PlanNode<T> input, Expression<Func<T, IEnumerable<TCollection>>> collectionSelector,
        Expression<Func<T, TCollection, TResult>> resultSelector)
        : PlanNode<TResult>(input.Worlds, input)
    {
        private readonly PlanNode<T> _input = input;
        private readonly Lambda<T, IEnumerable<TCollection>> _collection = new(collectionSelector, nameof(SelectMany));
        private readonly Lambda<T, TCollection, TResult> _result = new(resultSelector, nameof(SelectMany));

        public override string Describe() =>
            $"for each item: {PlanText.Lambda(_collection.Tree)}{PlanText.Into(_result.Tree)}";

        public override Flow<TResult> Start(QueryRun run)
        {
            Flow<T> input = _input.Start(run);
            return input.Then<TResult>(next => new ItemsSink(this, run, new Output<TResult>(run, input.Lineages.Width, next)));
        }

        public override Conjunction Translate() => throw new NoSafePlanException(
            $"the items of {PlanText.Lambda(_collection.Tree)} share their element's chance; make them records of their own to plan over them");

        private IEnumerable<TCollection> ItemsOf(T value) => _collection.Invoke(value) ?? throw new InvalidInputException(
            $"The lambda '{PlanText.Lambda(_collection.Tree)}' of SelectMany gave null for '{value}'. Give an empty collection instead.");

        private sealed class ItemsSink(SelectItemsNode<TCollection, TResult> node, QueryRun run, Output<TResult> output) : Sink<T>
        {
            public override void Take(Batch<T> batch)
            {
                for (int i = 0; i < batch.Count; i++)
                {
                    foreach (TCollection item in node.ItemsOf(batch.Values[i]))
                    {
                        run.Cancellation.ThrowIfCancellationRequested();
                        batch.Term(i).CopyTo(output.Add(node._result.Invoke(batch.Values[i], item)));
                    }
                }

                output.Send();
            }
        }
    }
}
