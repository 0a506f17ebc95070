using Uncertain.Inference;
using Uncertain.Inference.Compilation;

namespace Uncertain;

public readonly partial struct Lineage
{
    /// <summary>
    /// Compiles the lineage into a form that gives its probability again and again, also with other chances, without another
    /// compilation. Linear for lineages whose parts are independent or factor; else at most exponential in their width.
    /// </summary>
    /// <remarks>
    /// The form is the lineage's own, without evidence. For one probability given evidence call
    /// <see cref="Evaluate(EvaluationOptions?, CancellationToken)"/> with <see cref="EvaluationOptions.Given"/>; for
    /// probabilities that are asked again and again while evidence comes in, use <see cref="UncertainSet{T}.Maintain"/>.
    /// </remarks>
    /// <param name="options">Node budget, memory budget and deadline; evidence is refused, and the rest does not matter here.</param>
    /// <param name="cancellationToken">Cancels the compilation.</param>
    /// <exception cref="EvaluationRefusedException">
    /// A budget ran out, or evidence was given; the message says which, and what to do instead.
    /// </exception>
    public CompiledLineage Compile(EvaluationOptions? options = null, CancellationToken cancellationToken = default)
    {
        options ??= EvaluationOptions.Default;
        if (options.Given is { } given)
        {
            throw new EvaluationRefusedException(
                $"Lineage.Compile was given {given}, and a compiled form takes no evidence: its figures would be those without it. Leave "
                + "EvaluationOptions.Given out here; for a probability given evidence call Lineage.Evaluate with it, for many of them "
                + "UncertainSet.Maintain.");
        }

        return CompilationEvaluator.Compile(this, options, options.Clock.GetTimestamp(), cancellationToken);
    }
}
