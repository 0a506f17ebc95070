using System.Linq.Expressions;
using Uncertain.Execution;
using Uncertain.Planning;
using Uncertain.Planning.Calculus;

namespace Uncertain;

/// <content>Projection.</content>
public partial class UncertainSet<T>
{
    /// <summary>
    /// A value computed from each element. Equal results are one element, which is there where any of its origins is. Linear;
    /// the merging is done where the set is next needed as a set, at the latest in the answers.
    /// </summary>
    /// <param name="selector">The computation; the same value must always give an equal result.</param>
    /// <typeparam name="TResult">Type of the results.</typeparam>
    public UncertainSet<TResult> Select<TResult>(Expression<Func<T, TResult>> selector) => new(new SelectNode<TResult>(Node, selector));

    private sealed class SelectNode<TResult>(PlanNode<T> input, Expression<Func<T, TResult>> selector)
        : PlanNode<TResult>(input.Worlds, input)
    {
        private readonly PlanNode<T> _input = input;
        private readonly Lambda<T, TResult> _selector = new(selector, nameof(Select));

        public override string Describe() => $"select {PlanText.Lambda(_selector.Tree)}";

        public override Flow<TResult> Start(QueryRun run)
        {
            Flow<T> input = _input.Start(run);
            return input.Then<TResult>(next => new SelectSink<TResult>(_selector, run, input.Lineages.Width, next));
        }

        public override Conjunction Translate()
        {
            Conjunction body = _input.Translate();
            return body with { Value = body.Apply(_selector.Tree) };
        }
    }

    private sealed class SelectSink<TResult>(Lambda<T, TResult> selector, QueryRun run, int width, Sink<TResult> next) : Sink<T>
    {
        private readonly Batch<TResult> _output = new(width);

        public override void Take(Batch<T> batch)
        {
            if (_output.Values.Length < batch.Count)
            {
                _output.Values = new TResult[batch.Values.Length];
            }

            selector.InvokeAll(batch.Values, null, 0, _output.Values.AsSpan(0, batch.Count), run.Cancellation);
            _output.Terms = batch.Terms;
            _output.Count = batch.Count;
            next.Take(_output);
        }
    }
}
