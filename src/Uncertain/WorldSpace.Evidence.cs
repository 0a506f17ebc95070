namespace Uncertain;

/// <content>Evidence.</content>
public sealed partial class WorldSpace
{
    /// <summary>
    /// Evidence: all of some lineages are true. Confirmed records and answers by their lineages, refuted ones by <c>!lineage</c>, 'exactly
    /// one of these' by <see cref="Lineage.Exactly"/>. Changes nothing by itself: pass it in <see cref="EvaluationOptions.Given"/>.
    /// </summary>
    /// <param name="pieces">Lineages of this world space; none for no evidence.</param>
    /// <exception cref="WorldSpaceMismatchException">A lineage belongs to another world space.</exception>
    /// <exception cref="InvalidInputException">A lineage is <c>default</c>.</exception>
    public Evidence Given(params ReadOnlySpan<Lineage> pieces) => new Evidence(this, []).And(pieces);
}
