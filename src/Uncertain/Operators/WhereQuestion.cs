using System.Linq.Expressions;
using Uncertain.Execution;
using Uncertain.Lineages;
using Uncertain.Planning;
using Uncertain.Planning.Calculus;
using Uncertain.Worlds;

namespace Uncertain;

/// <content>Selection by a question.</content>
public partial class UncertainSet<T>
{
    /// <summary>
    /// The elements, in the worlds in which the answer to a question about them is yes: for groups what SQL's HAVING is,
    /// <c>groups.Where(g => g.Count() >= 3)</c>; for others a question over other sets that depends on the element. The question is run once
    /// for each element.
    /// </summary>
    /// <param name="question">The question about an element, of the same world space.</param>
    /// <exception cref="WorldSpaceMismatchException">A question belongs to another world space; thrown when the query runs.</exception>
    public UncertainSet<T> Where(Expression<Func<T, YesNoQuestion>> question) => new(new WhereQuestionNode(Node, question));

    private sealed class WhereQuestionNode(PlanNode<T> input, Expression<Func<T, YesNoQuestion>> question)
        : PlanNode<T>(input.Worlds, input)
    {
        private readonly PlanNode<T> _input = input;
        private readonly Lambda<T, YesNoQuestion> _question = new(question, nameof(Where));

        public override string Describe() => $"where {PlanText.Lambda(_question.Tree)}";

        public override Flow<T> Start(QueryRun run)
        {
            Merge<T> merge = Merge<T>.All(_input, run);
            LineageRef[] lineages = merge.Shared();
            for (int i = 0; i < lineages.Length; i++)
            {
                run.Cancellation.ThrowIfCancellationRequested();
                if (lineages[i] != LineageRef.False)
                {
                    lineages[i] = run.Arena.And(lineages[i], Yes(merge.Values[i], run));
                }
            }

            return new RecordList<T>(merge.Values, LineageColumn.Given(lineages)).Flow(run);
        }

        public override Conjunction Translate() => throw new NoSafePlanException("a question about each element has no safe plan");

        private LineageRef Yes(T element, QueryRun run)
        {
            YesNoQuestion question = _question.Invoke(element) ?? throw new InvalidInputException(
                $"The lambda '{PlanText.Lambda(_question.Tree)}' of Where gave null for '{element}'. Give a question for every element.");
            return ReferenceEquals(question.Worlds, Worlds)
                ? Merge<bool>.All(question.Node, run).Lookup().Find(true)
                : throw new WorldSpaceMismatchException($"The question of Where about '{element}'");
        }
    }
}
