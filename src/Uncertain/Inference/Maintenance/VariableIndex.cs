namespace Uncertain.Inference.Maintenance;

/// <summary>From each variable to the answers whose lineages depend on it; 4 bytes a variable and 4 a pair.</summary>
internal sealed class VariableIndex
{
    private readonly int[] _starts;
    private readonly int[] _answers;

    public VariableIndex(int variableCount, IReadOnlyList<int[]> variablesOf)
    {
        _starts = new int[variableCount + 1];
        foreach (int[] variables in variablesOf)
        {
            foreach (int variable in variables)
            {
                _starts[variable + 1]++;
            }
        }

        for (int variable = 0; variable < variableCount; variable++)
        {
            _starts[variable + 1] += _starts[variable];
        }

        _answers = new int[_starts[^1]];
        int[] next = [.. _starts];
        for (int answer = 0; answer < variablesOf.Count; answer++)
        {
            foreach (int variable in variablesOf[answer])
            {
                _answers[next[variable]++] = answer;
            }
        }
    }

    public ReadOnlySpan<int> AnswersOf(int variable) => _answers.AsSpan(_starts[variable].._starts[variable + 1]);
}
