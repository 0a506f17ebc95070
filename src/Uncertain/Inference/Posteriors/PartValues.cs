using Uncertain.Inference.Compilation;
using Uncertain.Numerics;
using Uncertain.Worlds;

namespace Uncertain.Inference.Posteriors;

/// <summary>A part of the evidence in compiled form, with both tails of each of its nodes.</summary>
internal sealed class PartValues
{
    private readonly Tails<ExtendedDouble>[] _values;
    private readonly ExtendedDouble[]?[] _weights;
    private readonly int[] _positions;

    private PartValues(EvidencePart part, CompiledForm form, VariableTable chances)
    {
        Part = part;
        Form = form;
        Chances = chances;
        _values = new Tails<ExtendedDouble>[form.NodeCount];
        _weights = new ExtendedDouble[form.Distributions.Length][];
        _positions = form.Positions();
        ForwardPass<ExtendedDouble, ExtendedChances>.TryRun(form, new ExtendedChances(new ChanceSetting(chances)), _values, _weights);
    }

    public EvidencePart Part { get; }

    public CompiledForm Form { get; }

    /// <summary>The chances before this part, given what is known of single variables.</summary>
    public VariableTable Chances { get; }

    /// <summary>The chance of the part.</summary>
    public ExtendedDouble Chance => Of(Form.Root).True;

    /// <summary>All parts of some evidence.</summary>
    /// <exception cref="InvalidInputException">The evidence is impossible.</exception>
    /// <exception cref="EvaluationRefusedException">A part could not be compiled within the budgets.</exception>
    public static List<PartValues> OfAll(Evidence evidence, EvaluationOptions options, CancellationToken cancellationToken)
    {
        long start = options.Clock.GetTimestamp();
        Findings findings = evidence.Findings(cancellationToken);
        var all = new List<PartValues>(findings.Parts.Count);
        foreach (EvidencePart part in findings.Parts)
        {
            cancellationToken.ThrowIfCancellationRequested();
            CompiledForm form = part.TryCompile(options, start, cancellationToken, out string? refusal)
                ?? throw new EvaluationRefusedException($"The evidence could not be compiled: {refusal}");
            all.Add(Of(part, form, findings));
            if (all[^1].Chance.IsZero)
            {
                throw Impossible.Because(evidence, cancellationToken);
            }
        }

        return all;
    }

    private static PartValues Of(EvidencePart part, CompiledForm form, Findings findings)
    {
        try
        {
            return new PartValues(part, form, findings.OpenChances);
        }
        catch (OverflowException exception)
        {
            throw new EvaluationRefusedException(
                "The probability of the evidence is below 2^-2,000,000,000, beyond the range of the evaluator's numbers. Give less of it "
                + "at a time.",
                exception);
        }
    }

    public Tails<ExtendedDouble> Of(int edge) =>
        (edge >> 1 == 0 ? Tails<ExtendedDouble>.Always : _values[edge >> 1]).NegateIf((edge & 1) != 0);

    /// <summary>Kind of a node, and its words behind the header: see <see cref="FormBuilder"/>.</summary>
    public (FormNodeKind Kind, ReadOnlyMemory<int> Words) Node(int node)
    {
        int position = _positions[node];
        int header = Form.Words[position];
        return ((FormNodeKind)(header & 3), Form.Words.AsMemory(position + 1, Form.Next(position) - position - 1));
    }

    /// <summary>The chances of the listed outcomes of a choice and, last, of all others together.</summary>
    public ExtendedDouble[] Weights(int distribution) => _weights[distribution]!;
}
