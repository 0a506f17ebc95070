using Uncertain.Inference;
using Uncertain.Inference.Compilation;

namespace Uncertain;

public readonly partial struct Lineage
{
    /// <summary>
    /// Compiles the lineage into a form that gives its probability again and again, also with other chances, without another
    /// compilation. Linear for lineages whose parts are independent or factor; else at most exponential in their width.
    /// </summary>
    /// <param name="options">Node budget, memory budget and deadline; the rest does not matter here.</param>
    /// <param name="cancellationToken">Cancels the compilation.</param>
    /// <exception cref="EvaluationRefusedException">A budget ran out; the message says which, and what to do instead.</exception>
    public CompiledLineage Compile(EvaluationOptions? options = null, CancellationToken cancellationToken = default)
    {
        options ??= EvaluationOptions.Default;
        return CompilationEvaluator.Compile(this, options, options.Clock.GetTimestamp(), cancellationToken);
    }
}
