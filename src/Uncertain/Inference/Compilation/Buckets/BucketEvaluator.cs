using Uncertain.Numerics;

namespace Uncertain.Inference.Compilation.Buckets;

/// <summary>Lists of terms prepared for <see cref="BucketElimination"/>: whether that is possible, and what it costs.</summary>
internal sealed class BucketEvaluator
{
    // A state of a bucket takes a tenth of a microsecond at most, a residual formula or a node of the form near one.
    private const double StatesPerNode = 64;

    // Up to here, a tenth of a second, buckets need no comparison with decisions.
    private const double QuickStates = 1 << 24;

    private readonly Func<TermNetwork> _network;
    private readonly TermNetwork _first;
    private readonly BucketPlan _plan;
    private readonly AtomTable _atoms;
    private readonly CompilationBudget _budget;
    private bool _isFresh = true;

    private BucketEvaluator(Func<TermNetwork> network, TermNetwork first, BucketPlan plan, AtomTable atoms, CompilationBudget budget)
    {
        _network = network;
        _first = first;
        _plan = plan;
        _atoms = atoms;
        _budget = budget;
        Cost = BucketElimination.Cost(first, plan);
    }

    /// <summary>The nodes that a compilation makes in the time that the buckets take.</summary>
    public long CostInNodes => (long)(Cost / StatesPerNode);

    /// <summary>Whether it takes so little that nothing else needs to be tried.</summary>
    public bool IsQuick => Cost <= QuickStates;

    private double Cost { get; }

    /// <summary>Null if tables are too large, or over the budgets.</summary>
    /// <param name="terms">The terms of all lists.</param>
    /// <param name="listEnds">Where each list ends among the terms.</param>
    /// <param name="atoms">The atoms.</param>
    /// <param name="workspace">Numbers the variables.</param>
    /// <param name="budget">Pays.</param>
    public static BucketEvaluator? TryPrepare(
        TermList terms, int[] listEnds, AtomTable atoms, Workspace workspace, CompilationBudget budget)
    {
        TermNetwork Network() => new(terms, listEnds, atoms, workspace, budget);
        TermNetwork network = Network();
        if (BucketPlan.TryMake(network, budget) is not { } plan)
        {
            return null;
        }

        var evaluator = new BucketEvaluator(Network, network, plan, atoms, budget);
        return evaluator.CostInNodes < budget.NodesLeft && budget.CanTake(BucketElimination.Bytes(network, plan)) ? evaluator : null;
    }

    /// <summary>The workspace has been used for something else since.</summary>
    public void Interrupt() => _isFresh = false;

    /// <summary>For each set of lists, as bits, the chance that these have a term that holds and the others have none.</summary>
    public ExtendedDouble[] Run(FormValues values)
    {
        TermNetwork network = _isFresh ? _first : _network();
        long bytes = BucketElimination.Bytes(network, _plan);
        _budget.Bytes(bytes);
        ExtendedDouble[] result = BucketElimination.Run(network, _plan, _atoms, values, _budget);
        _budget.Bytes(-bytes);
        _budget.Nodes((int)CostInNodes);
        return result;
    }
}
