using System.Linq.Expressions;
using Uncertain.Execution;
using Uncertain.Planning;
using Uncertain.Planning.Calculus;

namespace Uncertain;

/// <content>Projection.</content>
public sealed partial class UncertainSet<T>
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

        public override IEnumerable<Batch<TResult>> Run(QueryRun run)
        {
            var output = new Batch<TResult>();
            foreach (Batch<T> batch in _input.Run(run))
            {
                output.Count = 0;
                for (int i = 0; i < batch.Count; i++)
                {
                    run.Step();
                    output.Add(_selector.Invoke(batch.Values[i]), batch.Lineages[i]);
                }

                yield return output;
            }
        }

        public override Conjunction Translate()
        {
            Conjunction body = _input.Translate();
            return body with { Value = body.Apply(_selector.Tree) };
        }
    }
}
