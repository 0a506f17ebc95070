using System.Globalization;
using Uncertain.Inference;

namespace Uncertain.ReferenceCheck;

/// <summary>What the caller asked for.</summary>
/// <param name="Files">Files of cases or formulas.</param>
/// <param name="Evaluator">The evaluator of all cases.</param>
/// <param name="Limit">Time for each case.</param>
internal sealed record CommandLine(IReadOnlyList<string> Files, IEvaluator Evaluator, TimeSpan Limit)
{
    public const string Usage = """
        usage: Uncertain.ReferenceCheck FILE... [--evaluator chooser|safeplan|compilation|sampling] [--seconds S]
          FILE         a JSON list of cases, or a formula that starts with 'p dnf VARS TERMS' or 'p cnf VARS CLAUSES'
          --evaluator  who computes the probabilities (default: chooser)
          --seconds    time for each case, more than 0 (default: 60)
        """;

    /// <summary>Reads the arguments.</summary>
    /// <exception cref="ArgumentException">They cannot be understood; the message says why.</exception>
    public static CommandLine Parse(IReadOnlyList<string> arguments)
    {
        var files = new List<string>();
        IEvaluator evaluator = Evaluators.Chooser;
        double seconds = 60;
        for (int i = 0; i < arguments.Count; i++)
        {
            switch (arguments[i])
            {
                case "--evaluator":
                    evaluator = EvaluatorOf(ValueOf(arguments, ref i));
                    break;
                case "--seconds":
                    string text = ValueOf(arguments, ref i);
                    if (!double.TryParse(text, CultureInfo.InvariantCulture, out seconds) || !(seconds is > 0 and <= 1_000_000))
                    {
                        throw new ArgumentException($"--seconds is '{text}'; it must be a number above 0 and at most 1000000");
                    }

                    break;
                case ['-', ..] option:
                    throw new ArgumentException($"there is no option '{option}'");
                default:
                    files.Add(arguments[i]);
                    break;
            }
        }

        return files.Count > 0
            ? new CommandLine(files, evaluator, TimeSpan.FromSeconds(seconds))
            : throw new ArgumentException("no file is given");
    }

    private static string ValueOf(IReadOnlyList<string> arguments, ref int i) =>
        ++i < arguments.Count ? arguments[i] : throw new ArgumentException($"{arguments[i - 1]} needs a value");

    private static IEvaluator EvaluatorOf(string name) => name switch
    {
        "chooser" => Evaluators.Chooser,
        "safeplan" or "safe plan" => Evaluators.SafePlan,
        "compilation" => Evaluators.Compilation,
        "sampling" => Evaluators.Sampling,
        _ => throw new ArgumentException($"--evaluator is '{name}'; it must be chooser, safeplan, compilation or sampling"),
    };
}
