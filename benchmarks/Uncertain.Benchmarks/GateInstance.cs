using System.Runtime.InteropServices;
using Uncertain.Benchmarks.Baselines;
using Uncertain.Inference.Sampling;
using Uncertain.Lineages;

namespace Uncertain.Benchmarks;

/// <summary>
/// The lineages of a query's answers as sampling sees them: each of 2,000 records, with chances all different, is in some
/// derivations of three records, and ten derivations make an answer. One thread.
/// </summary>
public sealed class GateInstance
{
    private const int Variables = 2000;
    private const int Derivations = 10;
    private const int OperandsPerAnswer = Derivations * 4;

    private readonly IWorker _worker;
    private readonly AlignedWords _bits;
    private readonly WorldProgram _program;
    private readonly int[] _gates;
    private readonly int _answers;

    /// <param name="operands">Operands of gates for each variable.</param>
    public GateInstance(int operands)
    {
        var worlds = new WorldSpace();
        var random = new Random(1);
        Lineage[] records = [.. Enumerable.Range(0, Variables).Select(i => worlds.Event($"v{i}", random.NextDouble()))];
        _answers = Variables * operands / OperandsPerAnswer;
        int[][][] derivations =
        [
            .. Enumerable.Range(0, _answers).Select(_ => Enumerable.Range(0, Derivations).Select(_ => Three(random)).ToArray()),
        ];
        Lineage[] answers =
        [
            .. derivations.Select(answer => Lineage.Any([.. answer.Select(three => Lineage.All([.. three.Select(i => records[i])]))])),
        ];
        _gates = [.. derivations.SelectMany(GatesOf)];
        var budget = new WorkBudget(new EvaluationOptions(), CancellationToken.None);
        LineageRef[] roots = [.. answers.Select(answer => answer.Ref)];
        _program = WorldProgram.Build(answers[0].Arena, roots, 1, budget)!;
        _bits = new AlignedWords(_program.RowCount * WorldBlock.Words);
        new Random(1).NextBytes(MemoryMarshal.AsBytes(_bits.Span));
        _worker = VectorWidths.Best switch
        {
            VectorWidth.Eight => new DirectWorker<EightWords>(_program, WorldBlock.Words, budget),
            VectorWidth.Four => new DirectWorker<FourWords>(_program, WorldBlock.Words, budget),
            _ => new DirectWorker<OneWord>(_program, WorldBlock.Words, budget),
        };
    }

    /// <summary>Operands of all gates.</summary>
    public int OperandCount => _answers * OperandsPerAnswer;

    /// <summary>The library's kernel on ready bits.</summary>
    public void Gates(int worlds)
    {
        ref ulong words = ref MemoryMarshal.GetReference(_bits.Span);
        for (int world = 0; world < worlds; world += WorldBlock.Worlds)
        {
            _ = VectorWidths.Best switch
            {
                VectorWidth.Eight => GateKernel.Run<EightWords>(_program.Code, _program.Draws.RowCount, ref words, WorldBlock.Words),
                VectorWidth.Four => GateKernel.Run<FourWords>(_program.Code, _program.Draws.RowCount, ref words, WorldBlock.Words),
                _ => GateKernel.Run<OneWord>(_program.Code, _program.Draws.RowCount, ref words, WorldBlock.Words),
            };
        }
    }

    /// <summary>All that an estimate takes: the bits are drawn, the gates evaluated and the worlds counted.</summary>
    public void Worlds(int worlds) => _worker.Run(0, worlds);

    /// <summary>The same gates by hand.</summary>
    public ReadyBits ByHand(int words) => new(_gates, Variables, Variables + (_answers * (Derivations + 1)), words);

    /// <summary>Three different records.</summary>
    private static int[] Three(Random random)
    {
        var chosen = new HashSet<int>();
        while (chosen.Count < 3)
        {
            chosen.Add(random.Next(Variables));
        }

        return [.. chosen];
    }

    /// <summary>An answer's gates, the last of which is true where the answer is not there.</summary>
    private static IEnumerable<int> GatesOf(int[][] answer, int number)
    {
        int row = Variables + (number * (Derivations + 1));
        return answer.SelectMany(three => three.Select(i => 2 * i).Prepend(3))
            .Append(Derivations).Concat(Enumerable.Range(row, Derivations).Select(r => (2 * r) + 1));
    }
}
