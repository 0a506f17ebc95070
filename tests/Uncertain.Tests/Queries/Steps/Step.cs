using Uncertain.Tests.Queries.Rows;

namespace Uncertain.Tests.Queries.Steps;

/// <summary>
/// One step of a random query: builds the library's query, runs by System.Linq on the rows of one world, prints itself as C# and
/// offers simpler steps. All steps take and give rows, so that any step may take another's place.
/// </summary>
public abstract class Step
{
    public virtual IReadOnlyList<Step> Inputs => [];

    public abstract UncertainSet<TRow> Build<TRow>(BuildContext<TRow> context);

    /// <summary>The rows of one world by System.Linq; repeats do no harm.</summary>
    public abstract IEnumerable<Row> Run(WorldRows world);

    /// <summary>The same step on other inputs.</summary>
    public abstract Step On(IReadOnlyList<Step> inputs);

    /// <summary>The same step on the same inputs with simpler lambdas.</summary>
    public virtual IEnumerable<Step> Simpler() => [];

    public abstract override string ToString();

    /// <summary>All trees with one step less or one step simpler, the smallest first.</summary>
    public IEnumerable<Step> Shrink()
    {
        foreach (Step input in Inputs)
        {
            yield return input;
        }

        for (int i = 0; i < Inputs.Count; i++)
        {
            foreach (Step smaller in Inputs[i].Shrink())
            {
                Step[] inputs = [.. Inputs];
                inputs[i] = smaller;
                yield return On(inputs);
            }
        }

        foreach (Step simpler in Simpler())
        {
            yield return simpler;
        }
    }

    /// <summary>Numbers of the sources that the tree reads.</summary>
    public virtual IEnumerable<int> Sources() => Inputs.SelectMany(input => input.Sources());
}
