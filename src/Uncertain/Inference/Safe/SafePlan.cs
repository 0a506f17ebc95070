using Uncertain.Inference.Safe.Analysis;
using Uncertain.Inference.Safe.Steps;
using Uncertain.Operators;
using Uncertain.Planning;
using Uncertain.Worlds;

namespace Uncertain.Inference.Safe;

/// <summary>A safe plan of a whole query, with all that its runs have in common.</summary>
internal sealed class SafePlan
{
    private Delegate? _valueOf;

    private SafePlan(SafeStep root, QueryAnalysis analysis, bool isComplement)
    {
        Root = root;
        Value = analysis.Value;
        IsComplement = isComplement;
        FieldCount = analysis.FieldCount;
        Scans = [.. root.All().OfType<ScanStep>().OrderBy(scan => scan.Part.Source.RecordCount)];
        for (int i = 0; i < Scans.Length; i++)
        {
            Scans[i].Number = i;
        }
    }

    /// <summary>Gives the head variables.</summary>
    public SafeStep Root { get; }

    /// <summary>The answers' value from them.</summary>
    public Template Value { get; }

    /// <summary>Whether the question was negated.</summary>
    public bool IsComplement { get; }

    /// <summary>All fields of the query have smaller numbers.</summary>
    public int FieldCount { get; }

    /// <summary>
    /// The sources in the order in which they are read: small ones first, so that a large one finds most of its values known.
    /// </summary>
    public ScanStep[] Scans { get; }

    /// <exception cref="NoSafePlanException">There is none; the message is the reason.</exception>
    public static SafePlan For(PlanNode query)
    {
        bool isComplement = false;
        for (; query is NotNode not; query = not.Input)
        {
            isComplement = !isComplement;
        }

        QueryAnalysis analysis = QueryAnalysis.Of(query.Translate());
        return new SafePlan(SafePlanner.Plan(analysis.Root, analysis.Value.Variables), analysis, isComplement);
    }

    /// <summary>The answers' value as a function of the encoders and codes of the root's variables.</summary>
    /// <typeparam name="T">Type of the query's values.</typeparam>
    public Func<Encoder[], int[], T> ValueOf<T>() =>
        (Func<Encoder[], int[], T>)(_valueOf ??= Value.Compile<T>(Root.Variables));
}
