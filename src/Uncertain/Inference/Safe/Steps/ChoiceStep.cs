using Uncertain.Inference.Safe.Analysis;
using Uncertain.Inference.Safe.Codes;
using Uncertain.Numerics;

namespace Uncertain.Inference.Safe.Steps;

/// <summary>
/// Exclusive alternatives whose group is fixed: at most one of them is there, so the events that need different ones exclude each
/// other, and the probability is the sum over the alternatives of their chance times that of what must hold beside them.
/// </summary>
/// <remarks>
/// The second input covers each row of the first that could count, with the first read as certain. 1 - P is added up as well: from
/// the alternatives beside which the rest fails, those for which there is no row, and what is left in the group.
/// </remarks>
internal sealed class ChoiceStep(ScanStep alternatives, SafeStep beside, IEnumerable<Field> variables)
    : SafeStep(variables, alternatives, beside)
{
    private readonly ScanStep _alternatives = alternatives;
    private readonly SafeStep _beside = beside;

    public override string Describe() =>
        $"project to {Names(Variables)}: add over the exclusive alternatives of {_alternatives.Part.Source.Name}";

    protected override CodeTable<TNumber> Compute<TNumber>(SafeRun<TNumber> run)
    {
        Alternatives<TNumber> choices = Alternatives<TNumber>.Of(_alternatives, run.RowsOf(_alternatives), run);
        CodeTable<TNumber> beside = _beside.Run(run);
        RowKeys choiceKeys = RowKeys.Of(choices.Columns, choices.Chances.Length, run.Workspace, out int[] keyOfChoice);
        var choiceOfKey = new int[choiceKeys.Count];
        for (int choice = 0; choice < choices.Chances.Length; choice++)
        {
            choiceOfKey[keyOfChoice[choice]] = choice;
        }

        int[][] choiceColumns = beside.ColumnsOf(_alternatives.Variables);
        int[][] kept = beside.ColumnsOf(Variables);
        RowKeys outputs = RowKeys.Of(kept, beside.Count, run.Workspace, out int[] outputOf);
        var tails = new Tails<TNumber>[outputs.Count];
        var marked = new List<HashSet<int>>();
        for (int output = 0; output < tails.Length; output++)
        {
            marked.Add([]);
        }

        for (int row = 0; row < beside.Count; row++)
        {
            run.Tick(row);
            int choice = choiceOfKey[choiceKeys.Find(choiceColumns, row)];
            TNumber chance = choices.Chances[choice];
            ref Tails<TNumber> sum = ref tails[outputOf[row]];
            sum = new Tails<TNumber>(sum.True + (chance * beside.Tails[row].True), sum.False + (chance * beside.Tails[row].False));
            marked[outputOf[row]].Add(choice);
        }

        int widest = 1;
        for (int output = 0; output < tails.Length; output++)
        {
            HashSet<int> used = marked[output];
            widest = Math.Max(widest, used.Count);
            TNumber unused = choices.Unmarked(choices.GroupOfRow[used.First()], used.Contains);
            tails[output] = tails[output] with { False = tails[output].False + unused };
        }

        int[][] columns = Kernels.GatherAll(
            kept, outputs.FirstRows(outputOf.AsSpan(0, beside.Count), run.Workspace), run.Workspace);
        return new CodeTable<TNumber>(Variables, tails.Length, columns, new RowTails<TNumber>(tails), beside.Factors + widest + 1);
    }
}
