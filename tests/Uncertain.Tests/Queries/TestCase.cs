using System.Globalization;
using System.Text;
using Uncertain.Tests.Oracles;
using Uncertain.Tests.Queries.Cases;
using Uncertain.Tests.Queries.Rows;
using Uncertain.Tests.Queries.Steps;

namespace Uncertain.Tests.Queries;

/// <summary>A (query, data) pair.</summary>
/// <param name="Shape">The row type.</param>
/// <param name="Shared">The chances of named events (one chance) and choices, which lineages of sources may share.</param>
/// <param name="Sources">The sources; steps name them by number.</param>
/// <param name="Query">The query.</param>
/// <param name="Question">A question on top of it, or none.</param>
public sealed record TestCase(
    Shape Shape, IReadOnlyList<double[]> Shared, IReadOnlyList<SourceSpec> Sources, Step Query, Question Question)
{
    /// <summary>What is given, if anything.</summary>
    public IReadOnlyList<EvidencePiece> Evidence { get; init; } = [];

    /// <summary>Answers by System.Linq in every world.</summary>
    public Expectation Expect()
    {
        var model = new WorldModel();
        foreach (double[] chances in Shared)
        {
            model.Add(chances);
        }

        Formula[][] presence = [.. Sources.Select(source => source.AddTo(model))];
        return Expectation.Of(this, model, presence);
    }

    /// <summary>Cases with one thing less or simpler, the smallest first.</summary>
    public IEnumerable<TestCase> Shrink()
    {
        for (int i = 0; i < Evidence.Count; i++)
        {
            yield return this with { Evidence = [.. Evidence.Where((_, other) => other != i)] };
            foreach (EvidencePiece smaller in Evidence[i].Shrink())
            {
                EvidencePiece[] pieces = [.. Evidence];
                pieces[i] = smaller;
                yield return this with { Evidence = pieces };
            }
        }

        foreach (Question question in Question.Shrink())
        {
            yield return this with { Question = question };
        }

        foreach (Step query in Query.Shrink())
        {
            yield return this with { Query = query };
        }

        for (int i = 0; i < Sources.Count; i++)
        {
            foreach (SourceSpec smaller in Sources[i].Shrink())
            {
                SourceSpec[] sources = [.. Sources];
                sources[i] = smaller;
                yield return this with { Sources = sources };
            }
        }

        if (Shape != Shape.All[0])
        {
            yield return this with { Shape = Shape.All[0] };
        }
    }

    public override string ToString()
    {
        var text = new StringBuilder();
        for (int i = 0; i < Shared.Count; i++)
        {
            string method = Shared[i].Length == 1 ? "Event" : "Choice";
            text.Append(CultureInfo.InvariantCulture, $"var v{i} = worlds.{method}(\"v{i}\", {string.Join(", ", Shared[i])});\n");
        }

        for (int i = 0; i < Sources.Count; i++)
        {
            if (Query.Sources().Contains(i))
            {
                text.Append(Sources[i].Text($"s{i}")).Append('\n');
            }
        }

        foreach (EvidencePiece piece in Evidence)
        {
            text.Append(CultureInfo.InvariantCulture, $"given {piece}\n");
        }

        return text.Append(CultureInfo.InvariantCulture, $"{Question.Text($"{Query}")};   // Row is a {Shape}\n").ToString();
    }
}
