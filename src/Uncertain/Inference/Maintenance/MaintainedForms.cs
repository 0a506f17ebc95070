using Uncertain.Execution;
using Uncertain.Inference.Compilation;
using Uncertain.Inference.Posteriors;
using Uncertain.Lineages;
using Uncertain.Numerics;
using Uncertain.Worlds;

namespace Uncertain.Inference.Maintenance;

/// <summary>
/// The compiled forms of many lineages under chances and evidence that change. A change reaches the lineages that contain its variables,
/// and those that depend on the same evidence over several variables; nothing else is touched.
/// </summary>
internal sealed class MaintainedForms
{
    private static readonly Dictionary<int, double[]> s_noChances = [];

    private readonly EvaluationOptions _options;
    private readonly IReadOnlyList<Lineage> _lineages;
    private readonly LineageArena _arena;
    private readonly ChanceState _chances;
    private readonly ConditionedForm[] _forms;
    private readonly Probability[] _probabilities;
    private readonly VariableIndex _index;

    // What is known of single variables is in a table of its own, which grows with each piece; the findings are those of the last time that
    // all of the evidence was read, and their parts are the present ones.
    private Dictionary<int, bool[]> _allowed = [];
    private Findings _parts;

    public MaintainedForms(
        WorldSpace worlds, IReadOnlyList<Lineage> lineages, EvaluationOptions options, CancellationToken cancellationToken)
    {
        long start = options.Clock.GetTimestamp();
        _options = options;
        _lineages = lineages;
        _arena = new LineageArena(worlds);
        _chances = new ChanceState(worlds.Variables);
        Evidence = worlds.Given();
        _parts = FindingsReader.TryRead(_chances.Set, _arena, [], cancellationToken)!;
        _forms =
        [
            .. OrderedParallel.Select(
                lineages, options.Threads, (lineage, _) => new ConditionedForm(Compile(lineage, start, cancellationToken), null),
                cancellationToken),
        ];
        _probabilities = Array.ConvertAll(_forms, form => form.Probability);
        _index = new VariableIndex(_chances.Set.VariableCount, Array.ConvertAll(_forms, form => form.With.Variables.ToArray()));
    }

    public IReadOnlyList<Probability> Probabilities => _probabilities;

    public VariableTable SetChances => _chances.Set;

    public Evidence Evidence { get; private set; }

    /// <summary>
    /// One more piece is known. Where it speaks of single variables that are in no part of the evidence, only it is read and costs only
    /// what depends on these; else all of the evidence is. If it fails all is as before.
    /// </summary>
    /// <param name="piece">What is true.</param>
    /// <param name="cancellationToken">Cancels it.</param>
    /// <returns>What was changed, to be undone.</returns>
    /// <exception cref="InvalidInputException">It cannot be true given what is known.</exception>
    /// <exception cref="EvaluationRefusedException">A budget ran out while lineages were compiled with it.</exception>
    public MaintainedChange Confirm(Lineage piece, CancellationToken cancellationToken)
    {
        Evidence evidence = Evidence.And(piece);
        CheckKnown(piece);
        Findings own = FindingsReader.TryRead(_chances.Set, _arena, [piece], cancellationToken)
            ?? throw Impossible.Because(evidence, cancellationToken);
        if (own.Parts.Count > 0 || own.Allowed.Keys.Any(variable => _parts.PartOf(variable) is not null))
        {
            return Change(evidence, s_noChances, cancellationToken);
        }

        return Run(change =>
        {
            foreach ((int variable, bool[] allowed) in own.Allowed)
            {
                bool[]? before = _allowed.GetValueOrDefault(variable);
                bool[] now = before is null ? allowed : [.. allowed.Zip(before, (one, other) => one && other)];
                if (!now.Contains(true))
                {
                    throw Impossible.Because(evidence, cancellationToken);
                }

                if (before is null || !now.AsSpan().SequenceEqual(before))
                {
                    change.Narrowed.Add((variable, before));
                    _allowed[variable] = now;
                }
            }

            Restrict(change, change.Narrowed.Select(pair => pair.Variable), evidence);
            Update(change, change.Variables.SelectMany(variable => _index.AnswersOf(variable).ToArray()));
            Evidence = evidence;
        });
    }

    /// <summary>
    /// Changes chances, or what is known, or both. Reads all of the evidence. If it fails all is as before.
    /// </summary>
    /// <param name="evidence">All that is known then.</param>
    /// <param name="chances">The chances that are set anew, by variable.</param>
    /// <param name="cancellationToken">Cancels it.</param>
    /// <returns>What was changed, to be undone.</returns>
    /// <exception cref="InvalidInputException">The evidence is impossible.</exception>
    /// <exception cref="EvaluationRefusedException">A budget ran out while lineages were compiled with new evidence.</exception>
    public MaintainedChange Change(
        Evidence evidence, IReadOnlyDictionary<int, double[]> chances, CancellationToken cancellationToken) => Run(change =>
        {
            foreach ((int variable, double[] own) in chances)
            {
                change.Set.Add((variable, ChanceState.Of(_chances.Set, variable)));
                _chances.Set.Set(variable, own, VariableTable.Remainder(own));
            }

            Findings findings = FindingsReader.TryRead(_chances.Set, _arena, evidence.Pieces.AsSpan(), cancellationToken)
                ?? throw Impossible.Because(evidence, cancellationToken);
            findings.ReuseParts(_parts);
            Apply(change, evidence, findings, cancellationToken);
            Evidence = evidence;
            _parts = findings;
        });

    /// <summary>Takes the last change back.</summary>
    public void Undo(MaintainedChange change)
    {
        foreach ((int variable, (double[] chances, ExtendedDouble none)) in change.Set)
        {
            _chances.Set.Set(variable, chances, none);
        }

        foreach ((int variable, (double[] chances, ExtendedDouble none)) in change.Given)
        {
            _chances.Given.Set(variable, chances, none);
        }

        foreach ((int answer, ConditionedForm form, Probability probability) in change.Before)
        {
            // A form that was replaced still has the values from before; one that stayed takes the chances back.
            if (ReferenceEquals(_forms[answer], form))
            {
                form.Update(change.Variables);
            }

            _forms[answer] = form;
            _probabilities[answer] = probability;
        }

        (Evidence, _parts, _allowed) = (change.Evidence, change.Parts, change.Allowed);
        foreach ((int variable, bool[]? old) in change.Narrowed)
        {
            if (old is null)
            {
                _allowed.Remove(variable);
            }
            else
            {
                _allowed[variable] = old;
            }
        }
    }

    private void CheckKnown(Lineage piece)
    {
        var cone = new Sampling.Cone(piece.Arena);
        cone.Add(piece.Ref);
        if (cone.Slots.Any(slot => slot >= _chances.Set.SlotCount))
        {
            throw new InvalidInputException(
                $"{piece} contains what was added to the world space after these answers were made, so they know nothing of it. Make them again.");
        }
    }

    private MaintainedChange Run(Action<MaintainedChange> apply)
    {
        var change = new MaintainedChange(Evidence, _parts, _allowed);
        try
        {
            apply(change);
            return change;
        }
        catch (Exception exception)
        {
            Undo(change);
            if (exception is OverflowException)
            {
                throw new EvaluationRefusedException(
                    "A probability is below 2^-2,000,000,000 with this change, beyond the range of the evaluator's numbers. Nothing was changed.",
                    exception);
            }

            throw;
        }
    }

    // The chances of variables given what is known of each by itself.
    private void Restrict(MaintainedChange change, IEnumerable<int> variables, Evidence evidence)
    {
        foreach (int variable in variables)
        {
            change.Variables.Add(variable);
            change.Given.Add((variable, ChanceState.Of(_chances.Given, variable)));
            if (!_chances.TryRestrict(variable, _allowed.GetValueOrDefault(variable)))
            {
                throw Contradiction(evidence);
            }
        }
    }

    private void Update(MaintainedChange change, IEnumerable<int> answers)
    {
        foreach (int answer in answers.Distinct().Order())
        {
            change.Before.Add((answer, _forms[answer], _probabilities[answer]));
            _forms[answer].Update(change.Variables);
            _probabilities[answer] = _forms[answer].Probability;
        }
    }

    private void Apply(MaintainedChange change, Evidence evidence, Findings findings, CancellationToken cancellationToken)
    {
        long start = _options.Clock.GetTimestamp();
        int[] changed = [.. change.Set.Select(pair => pair.Variable).Union(Differing(_allowed, findings.Allowed))];
        _allowed = new Dictionary<int, bool[]>(findings.Allowed);
        Restrict(change, changed, evidence);

        // Lineages that depend on evidence which came or went have to be compiled with it anew.
        EvidencePart[] other = [.. findings.Parts.Except(_parts.Parts), .. _parts.Parts.Except(findings.Parts)];
        var recompiled = new SortedSet<int>();
        foreach (int variable in other.SelectMany(part => part.Variables))
        {
            recompiled.UnionWith(_index.AnswersOf(variable).ToArray());
        }

        var touched = new SortedSet<int>();
        foreach (int variable in change.Variables)
        {
            IReadOnlyList<int> tied = findings.PartOf(variable)?.Variables ?? [variable];
            foreach (int neighbour in tied)
            {
                touched.UnionWith(_index.AnswersOf(neighbour).ToArray());
            }
        }

        IEnumerable<EvidencePart> doubtful = findings.Parts.Except(_parts.Parts)
            .Union(change.Variables.Select(findings.PartOf).OfType<EvidencePart>());
        foreach (EvidencePart part in doubtful)
        {
            CheckPossible(part, evidence, start, cancellationToken);
        }

        touched.ExceptWith(recompiled);
        Update(change, touched);

        foreach (int answer in recompiled)
        {
            cancellationToken.ThrowIfCancellationRequested();
            ConditionedForm form = Compile(answer, findings, start, cancellationToken);
            change.Before.Add((answer, _forms[answer], _probabilities[answer]));
            _forms[answer] = form;
            _probabilities[answer] = form.Probability;
        }
    }

    private ConditionedForm Compile(int answer, Findings findings, long start, CancellationToken cancellationToken)
    {
        Lineage lineage = _lineages[answer];
        LineageRef formula = _arena.Import(lineage.Arena, lineage.Ref);
        var cone = new Sampling.Cone(_arena);
        cone.Add(formula);
        LineageRef[] parts =
        [
            .. cone.Slots.Select(slot => findings.PartOf(_chances.Set.VariableOf(slot))).OfType<EvidencePart>().Distinct()
                .Select(part => part.Formula),
        ];
        if (parts.Length == 0)
        {
            return new ConditionedForm(Compile(lineage, start, cancellationToken), null);
        }

        LineageRef evidence = _arena.And(parts);
        formula = Apart.From(_arena, formula, cone, variable => findings.PartOf(variable) is not null);
        return new ConditionedForm(
            Compile(new Lineage(_arena, _arena.And(formula, evidence)), start, cancellationToken),
            Compile(new Lineage(_arena, _arena.And(!formula, evidence)), start, cancellationToken));
    }

    private MaintainedForm Compile(Lineage lineage, long start, CancellationToken cancellationToken) =>
        new(CompilationEvaluator.Compile(lineage, _options, start, cancellationToken).Form, _chances.Given);

    private void CheckPossible(EvidencePart part, Evidence evidence, long start, CancellationToken cancellationToken)
    {
        CompiledForm form = part.TryCompile(_options, start, cancellationToken, out string? refusal)
            ?? throw new EvaluationRefusedException($"The evidence could not be compiled: {refusal}");
        Probability chance = form.Evaluate(new ChanceSetting(_chances.Given), CompilationEvaluator.EvaluatorName, () => default);
        if (chance.LogValue == double.NegativeInfinity)
        {
            throw Contradiction(evidence);
        }
    }

    // With the world space's own chances the evidence may be possible; it is the chances set here that rule it out.
    private static InvalidInputException Contradiction(Evidence evidence) => new(
        $"The evidence is impossible with the chances as they are set ({evidence}): some piece of it is true in no world of a chance above 0. "
        + "Nothing was changed. Check the last piece, or the chances of 0 and 1.");

    private static IEnumerable<int> Differing(IReadOnlyDictionary<int, bool[]> before, IReadOnlyDictionary<int, bool[]> after) =>
        before.Keys.Union(after.Keys).Where(variable =>
            !(before.TryGetValue(variable, out bool[]? old) && after.TryGetValue(variable, out bool[]? now) && old.AsSpan().SequenceEqual(now)));
}
