using Uncertain.Tests.Oracles;
using Uncertain.Tests.Queries;
using Xunit.Abstractions;

namespace Uncertain.Tests.Posteriors;

/// <summary>Posterior chances, the most probable world and drawn worlds of random evidence, against the possible worlds.</summary>
public sealed class PosteriorTests(ITestOutputHelper output)
{
    private const int Draws = 300;

    // A count k of n with chance p has n KL(k/n, p) above this with a chance of at most 2 exp(-60) = 2e-26 (W. Hoeffding, "Probability
    // inequalities for sums of bounded random variables", Journal of the American Statistical Association 58, 1963, theorem 1). Even
    // 1e12 comparisons give a false alarm with a chance below 1e-9.
    private const double LargestDivergence = 60;

    [Fact]
    public void Posterior_RandomEvidence_EqualsPossibleWorlds() => Run(7_000_000, 2, CheckPosterior);

    [Fact]
    public void MostProbableWorld_RandomEvidence_IsTheBestOfAll() => Run(7_100_000, 2, CheckBestWorld);

    [Fact]
    public void Draw_RandomEvidence_HasTheFrequenciesOfThePossibleWorlds() => Run(7_200_000, 20, CheckDraws);

    private void Run(int firstSeed, int share, Func<GivenCase, string?> check)
    {
        int count = Math.Max(150, RandomQueryRun.TotalCases / (4 * share));
        RandomQueryRun.Run(new EvidenceGenerator(new CaseGenerator()), firstSeed, count, Check, output);
        RandomQueryRun.Run(new EvidenceGenerator(new HierarchicalCaseGenerator()), firstSeed + 50_000_000, count, Check, output);

        string? Check(TestCase test)
        {
            try
            {
                return GivenCase.Of(test) is { IsPossible: true } given ? check(given) : null;
            }
            catch (Exception exception)
            {
                return $"threw {exception}";
            }
        }
    }

    private static string? CheckPosterior(GivenCase given)
    {
        Posterior posterior = given.Evidence.Posterior();
        for (int variable = 0; variable < given.Prior.Model.Variables.Count; variable++)
        {
            Lineage[] literals = GivenCase.Literals(given.Built.Worlds, variable);
            for (int outcome = 0; outcome < literals.Length; outcome++)
            {
                bool[] inWorld = [.. given.Worlds.Select(world => world.Outcomes[variable] == outcome)];
                if (Closeness.Differs(Presence.Of(inWorld, given.Worlds), posterior.Of(literals[outcome])) is { } difference)
                {
                    return $"outcome {outcome} of variable {variable} has {difference}";
                }

                Presence other = Presence.Of([.. inWorld.Select(there => !there)], given.Worlds);
                if (Closeness.Differs(other, posterior.Of(!literals[outcome])) is { } negated)
                {
                    return $"not outcome {outcome} of variable {variable} has {negated}";
                }
            }
        }

        return null;
    }

    private static string? CheckBestWorld(GivenCase given)
    {
        World world = given.Evidence.MostProbableWorld();
        double best = given.Worlds.Max(possible => possible.Chance);
        double own = given.Worlds[NumberOf(world, given)].Chance;
        if (Closeness.RelativeError(best, own) > Closeness.Exact)
        {
            return $"a world of chance {own:R} was found, the best one has {best:R}";
        }

        if (Closeness.RelativeError(own, world.Probability.Value) > Closeness.Exact)
        {
            return $"the world has the probability {world.Probability.Value:R}, by the worlds {own:R}";
        }

        double rest = given.Worlds.Where((_, i) => i != NumberOf(world, given)).Sum(possible => possible.Chance);
        return Closeness.RelativeError(rest, world.Probability.Complement) > Closeness.Exact && rest > 1e-17
            ? $"the world has the complement {world.Probability.Complement:R}, by the worlds {rest:R}"
            : CheckContent(world, given);
    }

    private static string? CheckContent(World world, GivenCase given)
    {
        int number = NumberOf(world, given);
        foreach ((object answer, Lineage lineage) in given.Built.Derive())
        {
            bool expected = given.Expected.Answers.TryGetValue(answer, out Presence? presence) && presence.InWorld[number];
            if (world.Holds(lineage) != expected)
            {
                return $"{answer} is {!expected} in world {number}";
            }
        }

        return null;
    }

    private static string? CheckDraws(GivenCase given)
    {
        var counts = new int[given.Worlds.Count];
        ulong seed = 1;
        foreach (World world in given.Evidence.Draw(Draws, new EvaluationOptions { Seed = seed }))
        {
            counts[NumberOf(world, given)]++;
        }

        for (int i = 0; i < counts.Length; i++)
        {
            if (Draws * Divergence((double)counts[i] / Draws, given.Worlds[i].Chance) > LargestDivergence)
            {
                return $"world {i} was drawn {counts[i]} times of {Draws}, its chance is {given.Worlds[i].Chance:R}";
            }
        }

        return null;
    }

    // Kullback and Leibler's, of a coin with chance q from one with chance p.
    private static double Divergence(double q, double p) => Part(q, p) + Part(1 - q, 1 - p);

    private static double Part(double q, double p) => q == 0 ? 0 : q * Math.Log(q / p);

    private static int NumberOf(World world, GivenCase given)
    {
        for (int i = 0; i < given.Worlds.Count; i++)
        {
            int[] outcomes = given.Worlds[i].Outcomes;
            bool isSame = true;
            for (int variable = 0; isSame && variable < outcomes.Length; variable++)
            {
                int none = given.Prior.Model.Variables[variable].Count;
                isSame = world.OutcomeOf(variable) == (outcomes[variable] < 0 ? none : outcomes[variable]);
            }

            if (isSame)
            {
                return i;
            }
        }

        throw new InvalidOperationException("The world is none of the possible ones.");
    }
}
