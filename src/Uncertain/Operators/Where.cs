using System.Linq.Expressions;
using Uncertain.Execution;
using Uncertain.Planning;
using Uncertain.Planning.Calculus;

namespace Uncertain;

/// <content>Selection.</content>
public partial class UncertainSet<T>
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

        public override Flow<T> Start(QueryRun run)
        {
            Flow<T> input = _input.Start(run);
            return input.Then<T>(next => new WhereSink(_predicate, run, new Output<T>(run, input.Lineages.Width, next)));
        }

        public override Conjunction Translate()
        {
            Conjunction body = _input.Translate();
            return body.Where(body.Apply(_predicate.Tree));
        }

        private sealed class WhereSink(Lambda<T, bool> predicate, QueryRun run, Output<T> output) : Sink<T>
        {
            private readonly bool[] _holds = new bool[Batch<T>.Capacity];

            public override void Take(Batch<T> batch)
            {
                predicate.InvokeAll(batch.Values, null, 0, _holds.AsSpan(0, batch.Count), run.Cancellation);
                for (int i = 0; i < batch.Count; i++)
                {
                    if (_holds[i])
                    {
                        batch.Term(i).CopyTo(output.Add(batch.Values[i]));
                    }
                }

                output.Send();
            }
        }
    }
}
