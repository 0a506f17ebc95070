using System.Linq.Expressions;
using Uncertain.Execution;

namespace Uncertain.Planning;

/// <summary>A step that gives records of one type.</summary>
internal abstract class PlanNode<T>(WorldSpace worlds, params PlanNode[] inputs) : PlanNode(worlds, inputs)
{
    /// <summary>
    /// Does what has to come before the first record, and gives the rest ready to run; lineages are of the run's arena. The same value
    /// may come several times; its worlds are then those of all its records together.
    /// </summary>
    public abstract Flow<T> Start(QueryRun run);

    /// <summary>
    /// This step with a condition on its records, or null if they can only be made and then tested. A product becomes a join here.
    /// </summary>
    public virtual PlanNode<T>? TryJoin(Expression<Func<T, bool>> condition) => null;
}
