using System.Globalization;
using Uncertain;
using Uncertain.Inference;

namespace PartTracing;

/// <summary>The command line.</summary>
internal sealed record Options
{
    public const string Help = """
        Traces suspect lots to the vessels of Norrvik Ferries, from slips that may have been misread.

        dotnet run -c Release --project examples/PartTracing -- [options]

          --data FOLDER     folder of the input files, with or without truth/ (default: the example's own data)
          --out FOLDER      folder of answers.csv, made if it is not there (default: out)
          --evaluator NAME  chooser (default), safeplan, compilation or sampling
          --epsilon E       ask for probabilities within E instead of exact ones, with 99 % confidence;
                            0 < E < 1 (sampling without it: 0.01)
          --seed N          seed of the draws, a whole number from 0 (default: 1)
          --cut SCORE       compare with taking each best reading whose raw score is at least SCORE,
                            0 to 100 (default: 60)
          --help            show this

        Exit codes: 0 done, 1 the data cannot be read or answers.csv not written, 2 an option is wrong.

        """;

    private static readonly Dictionary<string, IEvaluator> s_evaluators = new()
    {
        ["chooser"] = Evaluators.Chooser,
        ["safeplan"] = Evaluators.SafePlan,
        ["compilation"] = Evaluators.Compilation,
        ["sampling"] = Evaluators.Sampling,
    };

    public string DataFolder { get; private init; } = Path.Combine(AppContext.BaseDirectory, "data");

    public string OutFolder { get; private init; } = "out";

    public IEvaluator Evaluator { get; private init; } = Evaluators.Chooser;

    public double? Epsilon { get; private init; }

    public ulong Seed { get; private init; } = 1;

    public double Cut { get; private init; } = 60;

    public bool ShowHelp { get; private init; }

    /// <summary>What the chosen evaluator is asked for.</summary>
    public EvaluationOptions Evaluation => EvaluationBy(Evaluator);

    /// <summary>The same for another evaluator. Sampling is never exact, so it is asked for 0.01 at most.</summary>
    public EvaluationOptions EvaluationBy(IEvaluator evaluator) => new()
    {
        Evaluator = evaluator,
        Seed = Seed,
        Accuracy = (Epsilon, evaluator == Evaluators.Sampling) switch
        {
            ({ } epsilon, _) => Accuracy.Within(epsilon),
            (null, true) => Accuracy.Within(0.01),
            _ => Accuracy.Exact,
        },
    };

    /// <exception cref="OptionException">An option is unknown, lacks its value, or its value is out of bounds.</exception>
    public static Options Parse(IReadOnlyList<string> arguments)
    {
        var options = new Options();
        for (int i = 0; i < arguments.Count; i++)
        {
            string name = arguments[i];
            if (name is "--help" or "-h" or "-?")
            {
                return options with { ShowHelp = true };
            }

            string Value() => ++i < arguments.Count
                ? arguments[i]
                : throw new OptionException($"{name} needs a value after it.");

            options = name switch
            {
                "--data" => options with { DataFolder = Value() },
                "--out" => options with { OutFolder = Value() },
                "--evaluator" => options with { Evaluator = EvaluatorOf(Value()) },
                "--epsilon" => options with { Epsilon = Number(name, Value(), "between 0 and 1, for example 0.01", e => e is > 0 and < 1) },
                "--seed" => options with { Seed = SeedOf(Value()) },
                "--cut" => options with { Cut = Number(name, Value(), "from 0 to 100", score => score is >= 0 and <= 100) },
                _ => throw new OptionException($"'{name}' is not an option."),
            };
        }

        return options;
    }

    private static IEvaluator EvaluatorOf(string value) => s_evaluators.TryGetValue(value, out IEvaluator? evaluator)
        ? evaluator
        : throw new OptionException($"--evaluator is '{value}', but must be one of {string.Join(", ", s_evaluators.Keys)}.");

    private static ulong SeedOf(string value) =>
        ulong.TryParse(value, NumberStyles.None, CultureInfo.InvariantCulture, out ulong seed)
            ? seed
            : throw new OptionException($"--seed is '{value}', but must be a whole number from 0 to {ulong.MaxValue}.");

    private static double Number(string name, string value, string bounds, Func<double, bool> isInBounds) =>
        double.TryParse(value, NumberStyles.Float, CultureInfo.InvariantCulture, out double number) && isInBounds(number)
            ? number
            : throw new OptionException($"{name} is '{value}', but must be a number {bounds}.");
}
