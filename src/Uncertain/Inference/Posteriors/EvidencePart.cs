using Uncertain.Inference.Compilation;
using Uncertain.Lineages;
using Uncertain.Worlds;

namespace Uncertain.Inference.Posteriors;

/// <summary>Evidence over several variables that is independent of all the rest; compiled when that is first needed.</summary>
/// <param name="arena">Where the formula is.</param>
/// <param name="formula">What is true.</param>
/// <param name="variables">The variables of the formula, ascending.</param>
internal sealed class EvidencePart(LineageArena arena, LineageRef formula, int[] variables)
{
    private readonly Lock _lock = new();
    private CompiledForm? _form;
    private bool? _isPossible;

    public LineageArena Arena => arena;

    public LineageRef Formula => formula;

    public IReadOnlyList<int> Variables => variables;

    /// <summary>The compiled form, or which budget ran out.</summary>
    public CompiledForm? TryCompile(EvaluationOptions options, long start, CancellationToken cancellationToken, out string? refusal)
    {
        lock (_lock)
        {
            refusal = null;
            if (_form is null && CompilationEvaluator.TryCompile(
                new Lineage(arena, formula), options, start, cancellationToken, out CompiledLineage? compiled, out refusal))
            {
                _form = compiled!.Form;
            }

            return _form;
        }
    }

    /// <summary>Whether it holds in any world; null if a budget ran out before that was known.</summary>
    public bool? IsPossible(
        VariableTable chances, EvaluationOptions options, long start, CancellationToken cancellationToken, out string? refusal)
    {
        refusal = null;
        if (_isPossible is null && TryCompile(options, start, cancellationToken, out refusal) is { } form)
        {
            _isPossible = form.Evaluate(new ChanceSetting(chances), CompilationEvaluator.EvaluatorName, () => default).LogValue
                > double.NegativeInfinity;
        }

        return _isPossible;
    }
}
