using Uncertain.Lineages;
using Uncertain.Tests.Oracles;
using Uncertain.Tests.Queries;
using Uncertain.Tests.Queries.Cases;
using Uncertain.Tests.Queries.Rows;

namespace Uncertain.Tests.Posteriors;

/// <summary>A case with evidence as the worlds see it: those where the evidence holds, with their shares of its chance.</summary>
internal sealed class GivenCase
{
    private GivenCase(Expectation expected, IBuiltQuery built, Evidence evidence, bool[] holds)
    {
        Prior = expected;
        Built = built;
        Evidence = evidence;
        Chance = Total(expected, holds);
        Worlds = [.. expected.Worlds.Select((world, i) => (world.Outcomes, holds[i] ? world.Chance / Chance : 0))];
        Expected = expected with
        {
            Worlds = Worlds,
            Answers = expected.Answers.ToDictionary(pair => pair.Key, pair => Presence.Of(pair.Value.InWorld, Worlds)),
        };
    }

    public Expectation Prior { get; }

    /// <summary>The same given the evidence.</summary>
    public Expectation Expected { get; }

    public IBuiltQuery Built { get; }

    public Evidence Evidence { get; }

    /// <summary>The chance of the evidence.</summary>
    public double Chance { get; }

    public IReadOnlyList<(int[] Outcomes, double Chance)> Worlds { get; }

    public bool IsPossible => Chance > 0;

    /// <summary>Null if the evidence speaks of variables that the case does not have.</summary>
    public static GivenCase? Of(TestCase test)
    {
        Expectation expected = test.Expect();
        IBuiltQuery built = test.Shape.Build(test);
        if (CaseChecker.CheckVariables(expected, built) is not null || !test.Evidence.All(piece => IsKnown(piece.Formula, expected.Model)))
        {
            return null;
        }

        IReadOnlyList<Lineage>[] outcomes = [.. expected.Model.Variables.Select((chances, variable) => Literals(built.Worlds, variable))];
        var holds = new bool[expected.Worlds.Count];
        Array.Fill(holds, true);
        foreach (EvidencePiece piece in test.Evidence)
        {
            bool[] inWorld = piece.Holds(expected, built);
            for (int i = 0; i < holds.Length; i++)
            {
                holds[i] &= inWorld[i];
            }
        }

        return new GivenCase(
            expected, built, built.Worlds.Given([.. test.Evidence.Select(piece => piece.Build(built, outcomes))]), holds);
    }

    /// <summary>The lineages of a variable's outcomes.</summary>
    public static Lineage[] Literals(WorldSpace worlds, int variable)
    {
        int first = worlds.Variables.FirstSlot(variable);
        return
        [
            .. Enumerable.Range(0, worlds.Variables.OutcomeCount(variable))
                .Select(outcome => new Lineage(worlds.Arena, LineageRef.Literal(first + outcome))),
        ];
    }

    private static double Total(Expectation expected, bool[] holds) => expected.Worlds.Where((_, i) => holds[i]).Sum(world => world.Chance);

    private static bool IsKnown(Formula? formula, WorldModel model) => formula switch
    {
        OutcomeFormula outcome => outcome.Variable < model.Variables.Count && outcome.Outcome < model.Variables[outcome.Variable].Count,
        NotFormula not => IsKnown(not.Operand, model),
        CountFormula count => count.Operands.All(operand => IsKnown(operand, model)),
        _ => true,
    };
}
