using Uncertain.Execution;
using Uncertain.Planning;
using Uncertain.Planning.Calculus;

namespace Uncertain.Operators;

/// <summary>Yes, where the input has any element.</summary>
internal sealed class AnyNode<T>(PlanNode<T> input) : PlanNode<bool>(input.Worlds, input)
{
    private readonly PlanNode<T> _input = input;

    public override string Describe() => "is there any";

    public override Flow<bool> Start(QueryRun run)
    {
        Flow<T> input = _input.Start(run);
        return input.Then<bool>(next => new AnySink(input.Lineages.Width, next));
    }

    public override Conjunction Translate() =>
        _input.Translate() with { Value = System.Linq.Expressions.Expression.Constant(true) };

    // Every record is a yes; merging is done where the answer is needed.
    private sealed class AnySink(int width, Sink<bool> next) : Sink<T>
    {
        private readonly Batch<bool> _output = new(width);

        public override void Take(Batch<T> batch)
        {
            if (_output.Values.Length < batch.Count)
            {
                _output.Values = new bool[batch.Values.Length];
                _output.Values.AsSpan().Fill(true);
            }

            _output.Terms = batch.Terms;
            _output.Count = batch.Count;
            next.Take(_output);
        }
    }
}
