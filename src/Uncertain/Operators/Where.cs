using System.Linq.Expressions;
using Uncertain.Execution;
using Uncertain.Planning;
using Uncertain.Planning.Calculus;

namespace Uncertain;

/// <content>Selection.</content>
public sealed partial class UncertainSet<T>
{
    /// <summary>
    /// The elements that satisfy a condition, with the lineages they had. Linear. On a product, an equality between the two sides is run
    /// as a join.
    /// </summary>
    /// <param name="predicate">The condition on a value; the same value must always give the same result.</param>
    public UncertainSet<T> Where(Expression<Func<T, bool>> predicate)
    {
        ArgumentNullException.ThrowIfNull(predicate);
        return new UncertainSet<T>(new WhereNode(Node.TryJoin(predicate) ?? Node, predicate));
    }

    private sealed class WhereNode(PlanNode<T> input, Expression<Func<T, bool>> predicate) : PlanNode<T>(input.Worlds, input)
    {
        private readonly PlanNode<T> _input = input;
        private readonly Lambda<T, bool> _predicate = new(predicate, nameof(Where));

        public override string Describe() => $"where {PlanText.Lambda(_predicate.Tree)}";

        public override IEnumerable<Batch<T>> Run(QueryRun run)
        {
            var output = new Batch<T>();
            foreach (Batch<T> batch in _input.Run(run))
            {
                output.Count = 0;
                for (int i = 0; i < batch.Count; i++)
                {
                    run.Step();
                    if (_predicate.Invoke(batch.Values[i]))
                    {
                        output.Add(batch.Values[i], batch.Lineages[i]);
                    }
                }

                yield return output;
            }
        }

        public override Conjunction Translate()
        {
            Conjunction body = _input.Translate();
            return body.Where(body.Apply(_predicate.Tree));
        }
    }
}
