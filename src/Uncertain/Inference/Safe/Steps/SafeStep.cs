using System.Numerics;
using System.Text;
using Uncertain.Inference.Safe.Analysis;
using Uncertain.Inference.Safe.Codes;

namespace Uncertain.Inference.Safe.Steps;

/// <summary>
/// One step of a safe plan: distinct combinations of its variables with exact probabilities.
/// </summary>
internal abstract class SafeStep(IEnumerable<Field> variables, params SafeStep[] inputs)
{
    /// <summary>The variables of the result, one column each.</summary>
    public IReadOnlyList<Field> Variables { get; } = [.. variables];

    public IReadOnlyList<SafeStep> Inputs { get; } = inputs;

    /// <summary>This step and all below it.</summary>
    public List<SafeStep> All()
    {
        List<SafeStep> steps = [this];
        for (int i = 0; i < steps.Count; i++)
        {
            steps.AddRange(steps[i].Inputs);
        }

        return steps;
    }

    /// <summary>The step in words, without its inputs: one line.</summary>
    public abstract string Describe();

    /// <summary>The result; of a step whose result is the same for all parts of a split run, the one computed for all.</summary>
    public CodeTable<TNumber> Run<TNumber>(SafeRun<TNumber> run)
        where TNumber : unmanaged, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
            IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>
    {
        if (run.Shared(this) is { } shared)
        {
            return shared;
        }

        CodeTable<TNumber> result = Compute(run);
        run.Control.Done(result.Count);
        return result;
    }

    protected abstract CodeTable<TNumber> Compute<TNumber>(SafeRun<TNumber> run)
        where TNumber : unmanaged, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
            IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>;

    public override string ToString()
    {
        var text = new StringBuilder();
        Append(text, 0);
        return text.ToString();
    }

    protected static string Names(IEnumerable<Field> variables)
    {
        string names = string.Join(", ", variables.Select(variable => variable.Name));
        return names.Length == 0 ? "nothing" : names;
    }

    private void Append(StringBuilder text, int depth)
    {
        text.Append(' ', 2 * depth).Append(Describe()).Append('\n');
        foreach (SafeStep input in Inputs)
        {
            input.Append(text, depth + 1);
        }
    }
}
