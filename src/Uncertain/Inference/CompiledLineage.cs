using System.Globalization;
using Uncertain.Inference.Compilation;
using Uncertain.Lineages;
using Uncertain.Numerics;
using Uncertain.Worlds;

namespace Uncertain.Inference;

/// <summary>
/// A lineage in a form that gives its probability in one pass, again and again, with the chances of the world space or with
/// others. Obtained from <see cref="Lineage.Compile"/>. Immutable; safe for concurrent use.
/// </summary>
/// <remarks>
/// The form is decomposable and deterministic (d-DNNF with negation; A. Darwiche, P. Marquis, "A knowledge compilation map",
/// Journal of Artificial Intelligence Research 17, 2002): conjunctions are of independent parts, the branches of a decision
/// exclude each other. An evaluation costs time linear in <see cref="NodeCount"/>; both tails keep 1e-12 relative.
/// </remarks>
public sealed class CompiledLineage
{
    private readonly CompiledForm _form;

    internal CompiledLineage(Lineage lineage, CompiledForm form)
    {
        Lineage = lineage;
        _form = form;
    }

    /// <summary>The lineage that was compiled.</summary>
    public Lineage Lineage { get; }

    /// <summary>Number of nodes of the form.</summary>
    public int NodeCount => _form.NodeCount;

    internal CompiledForm Form => _form;

    /// <summary>The probability under the chances of the world space; exact.</summary>
    /// <exception cref="EvaluationRefusedException">A probability is below the range of the evaluator's numbers.</exception>
    public Probability Evaluate() => Evaluate(Timer());

    /// <summary>The probability if some records or events had other chances; exact. The world space is not changed.</summary>
    /// <param name="changedChances">
    /// The chances in [0, 1] to use instead, by literal (an event, a record's or an alternative's own lineage). The outcomes of
    /// one variable add up to at most 1, those that are not named keep their chances, and 'none of them' takes the rest.
    /// A literal that the lineage does not contain changes nothing.
    /// </param>
    /// <exception cref="InvalidInputException">
    /// A key is no literal, a chance is not in [0, 1], or the outcomes of a variable add up to more than 1.
    /// </exception>
    /// <exception cref="WorldSpaceMismatchException">A key belongs to another world space.</exception>
    /// <exception cref="EvaluationRefusedException">A probability is below the range of the evaluator's numbers.</exception>
    public Probability Evaluate(IReadOnlyDictionary<Lineage, double> changedChances)
    {
        ArgumentNullException.ThrowIfNull(changedChances);
        Func<Cost> cost = Timer();
        return _form.Evaluate(Setting(changedChances), CompilationEvaluator.EvaluatorName, cost);
    }

    /// <summary>
    /// The probabilities under many settings of the chances; exact, and the same figures as one by one. Eight settings are computed
    /// side by side, which takes a fraction of the time.
    /// </summary>
    /// <param name="settings">For each setting the changed chances, as in <see cref="Evaluate(IReadOnlyDictionary{Lineage, double})"/>.</param>
    /// <returns>The probabilities in the order of the settings; each one's cost is the time since the call.</returns>
    /// <exception cref="InvalidInputException">
    /// A key is no literal, a chance is not in [0, 1], or the outcomes of a variable add up to more than 1.
    /// </exception>
    /// <exception cref="WorldSpaceMismatchException">A key belongs to another world space.</exception>
    /// <exception cref="EvaluationRefusedException">A probability is below the range of the evaluator's numbers.</exception>
    public IReadOnlyList<Probability> Evaluate(IReadOnlyList<IReadOnlyDictionary<Lineage, double>> settings)
    {
        ArgumentNullException.ThrowIfNull(settings);
        Func<Cost> cost = Timer();
        var own = new ChanceSetting[settings.Count];
        for (int i = 0; i < own.Length; i++)
        {
            own[i] = Setting(settings[i] ?? throw new ArgumentNullException(nameof(settings), $"Setting {i} is null."));
        }

        return _form.Evaluate(own, CompilationEvaluator.EvaluatorName, cost);
    }

    /// <summary>
    /// How much the probability changes with the chance of each literal of the lineage: for an event
    /// P(lineage given the event) - P(lineage given its absence), in [-1, 1]; for an alternative of a many-outcome variable
    /// P(lineage given the alternative) - P(lineage given none of the alternatives).
    /// </summary>
    /// <returns>
    /// The derivatives by literal: an event's, a record's or an alternative's own lineage. Literals that are not in the form have the
    /// derivative 0 and are not listed.
    /// </returns>
    /// <remarks>
    /// <para>Reverse accumulation (A. Darwiche, "A differential approach to inference in Bayesian networks", Journal of the ACM 50,
    /// 2003): one pass forward and one backward give all of them, in time linear in <see cref="NodeCount"/>. For an event this is
    /// the importance after Z. W. Birnbaum, "On the importance of different components in a multicomponent system", 1969.</para>
    /// <para>1e-12 relative, as long as the two probabilities whose difference is taken, or their complements, do not agree in
    /// more than 18 digits.</para>
    /// </remarks>
    /// <exception cref="EvaluationRefusedException">A probability is below the range of the evaluator's numbers.</exception>
    public IReadOnlyDictionary<Lineage, double> Derivatives() => Derivatives(new ChanceSetting(Lineage.Worlds.Variables));

    /// <summary>The derivatives if some records or events had other chances, see <see cref="Derivatives()"/>.</summary>
    /// <param name="changedChances">As in <see cref="Evaluate(IReadOnlyDictionary{Lineage, double})"/>.</param>
    /// <returns>The derivatives by literal.</returns>
    /// <exception cref="InvalidInputException">
    /// A key is no literal, a chance is not in [0, 1], or the outcomes of a variable add up to more than 1.
    /// </exception>
    /// <exception cref="WorldSpaceMismatchException">A key belongs to another world space.</exception>
    /// <exception cref="EvaluationRefusedException">A probability is below the range of the evaluator's numbers.</exception>
    public IReadOnlyDictionary<Lineage, double> Derivatives(IReadOnlyDictionary<Lineage, double> changedChances)
    {
        ArgumentNullException.ThrowIfNull(changedChances);
        return Derivatives(Setting(changedChances));
    }

    /// <summary>For example <c>compiled lineage: 1,204 nodes</c>.</summary>
    public override string ToString() =>
        string.Create(CultureInfo.InvariantCulture, $"compiled lineage: {NodeCount:N0} {(NodeCount == 1 ? "node" : "nodes")}");

    internal Probability Evaluate(Func<Cost> cost) =>
        _form.Evaluate(new ChanceSetting(Lineage.Worlds.Variables), CompilationEvaluator.EvaluatorName, cost);

    private Dictionary<Lineage, double> Derivatives(ChanceSetting setting)
    {
        // Doubles suffice unless a difference takes digits away.
        if (_form.TryDerive(setting, out double error) is { } plain
            && Array.TrueForAll(plain.OfSlot, difference => KeepsDigits(difference, error)))
        {
            return ByLiteral(plain.Slots, i => plain.OfSlot[i].Rise - plain.OfSlot[i].Fall);
        }

        FormDerivatives<ExtendedDouble> extended = _form.Derive(setting);
        return ByLiteral(
            extended.Slots, i => ExtendedDouble.Subtract(extended.OfSlot[i].Rise, extended.OfSlot[i].Fall));
    }

    private Dictionary<Lineage, double> ByLiteral(int[] slots, Func<int, double> derivative)
    {
        var result = new Dictionary<Lineage, double>(slots.Length);
        for (int i = 0; i < slots.Length; i++)
        {
            result.Add(new Lineage(Lineage.Arena, LineageRef.Literal(slots[i])), derivative(i));
        }

        return result;
    }

    // The error of both parts must stay below the promised one of what is left of them.
    private static bool KeepsDigits(Difference<double> difference, double error) =>
        1e-12 * Math.Abs(difference.Rise - difference.Fall) >= error * (difference.Rise + difference.Fall);

    private Func<Cost> Timer()
    {
        long start = TimeProvider.System.GetTimestamp();
        return () => new Cost(TimeProvider.System.GetElapsedTime(start), NodeCount, 0);
    }

    private ChanceSetting Setting(IReadOnlyDictionary<Lineage, double> changedChances)
    {
        VariableTable table = Lineage.Worlds.Variables;
        var changes = new Dictionary<int, double>(changedChances.Count);
        foreach ((Lineage literal, double chance) in changedChances)
        {
            if (!ReferenceEquals(literal.Worlds, Lineage.Worlds))
            {
                throw new WorldSpaceMismatchException($"The changed chance of {literal}");
            }

            if (literal.Kind != LineageKind.Literal)
            {
                throw new InvalidInputException(
                    $"A chance can be changed for a literal only, and {literal} is a {literal.Kind}. Give the chances of the events, "
                    + "records or alternatives that it is made of; what is certain or impossible has no chance to change.");
            }

            Chances.Check(chance, literal.ToString());
            changes[literal.Ref.Index] = chance;
        }

        var setting = new ChanceSetting(table, changes);
        foreach (int slot in changes.Keys)
        {
            if (table.IsAlternative(slot))
            {
                double sum = setting.ChancesOf(table.VariableOf(slot)).Sum();
                Chances.CheckSum(sum, $"the alternatives of {Lineage.Worlds.Names.NameOf(slot)}");
            }
        }

        return setting;
    }
}
