using Uncertain.Inference.Compilation;
using Uncertain.Lineages;
using Uncertain.Worlds;

namespace Uncertain.Inference.Aggregates;

/// <summary>Divides lineages into groups that share no variable with each other, and so are independent. Linear; no recursion.</summary>
internal sealed class SharedParts(LineageArena arena, AggregateBudget budget)
{
    private readonly VariableTable _variables = arena.Worlds.Variables;
    private readonly Dictionary<int, int> _ownerOfNode = [];
    private readonly Stack<int> _pending = new();
    private Dictionary<int, int> _ownerOfVariable = [];

    /// <summary>The places of the lineages of each group, both in order.</summary>
    public List<List<int>> Of(ReadOnlySpan<LineageRef> lineages)
    {
        _ownerOfNode.Clear();
        _ownerOfVariable = new Dictionary<int, int>(lineages.Length);
        var sets = new DisjointSets(lineages.Length);
        for (int i = 0; i < lineages.Length; i++)
        {
            budget.Step(5);
            Visit(lineages[i], i, sets);
            while (_pending.TryPop(out int node))
            {
                foreach (LineageRef operand in arena.Operands(node))
                {
                    budget.Step();
                    Visit(operand, i, sets);
                }
            }
        }

        var groups = new List<List<int>>(sets.Count);
        var groupOfRoot = new int[lineages.Length];
        for (int i = 0; i < lineages.Length; i++)
        {
            int root = sets.Find(i);
            if (root == i)
            {
                groupOfRoot[i] = groups.Count;
                groups.Add([]);
            }

            groups[groupOfRoot[root]].Add(i);
        }

        return groups;
    }

    private void Visit(LineageRef lineage, int owner, DisjointSets sets)
    {
        bool isNode = lineage.IsNode;
        if (lineage.IsConstant)
        {
            return;
        }

        Dictionary<int, int> owners = isNode ? _ownerOfNode : _ownerOfVariable;
        if (!owners.TryAdd(isNode ? lineage.Index : _variables.VariableOf(lineage.Index), owner))
        {
            sets.Union(owner, owners[isNode ? lineage.Index : _variables.VariableOf(lineage.Index)]);
        }
        else if (isNode)
        {
            _pending.Push(lineage.Index);
        }
    }
}
