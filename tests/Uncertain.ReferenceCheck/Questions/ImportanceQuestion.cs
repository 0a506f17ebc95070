using System.Globalization;
using MathNet.Numerics.Integration;
using Uncertain.ReferenceCheck.Cases;
using Uncertain.ReferenceCheck.Lineages;
using Uncertain.ReferenceCheck.Solving;

namespace Uncertain.ReferenceCheck.Questions;

/// <summary>Importance of variables or players, from the probability that a variable is pivotal: that its truth decides.</summary>
internal static class ImportanceQuestion
{
    // Orders for which the nodes are tabulated to full precision.
    private static readonly int[] s_quadratureOrders = [.. Enumerable.Range(2, 19), 32, 64, 96, 100, 128, 256, 512, 1024];

    public static IReadOnlyList<Figure> Ask(Field input, Solver solver)
    {
        Players players = input.Optional("game") is { } game ? new Game(game) : new Formula(input);
        Field measure = input["measure"];
        Figure[] figures = measure.Text switch
        {
            "birnbaum" => Pivotal(players, players.Chances, solver),
            "banzhaf" => Pivotal(players, Chance.Half, solver),
            "banzhaf_normalized" => Normalize(Pivotal(players, Chance.Half, solver)),
            "shapley" => Shapley(players, solver),
            _ => throw measure.Wrong("shapley, banzhaf, banzhaf_normalized or birnbaum"),
        };
        return [.. figures.Zip(players.Names, (figure, name) => figure with { Key = name })];
    }

    // P(f | v) - P(f | not v) as P(v makes f true) - P(v makes f false): no digits are lost.
    private static Figure[] Pivotal(Players players, IReadOnlyList<Chance> chances, Solver solver)
    {
        var worlds = new WorldSpace();
        Lineage[] events = NewEvents(worlds, chances);
        return ByRole(players, player =>
        {
            (Lineage makesTrue, Lineage makesFalse) = players.Pivot(worlds, events, player, solver);
            return solver.Chance(makesTrue) - solver.Chance(makesFalse);
        });
    }

    private static Lineage[] NewEvents(WorldSpace worlds, IReadOnlyList<Chance> chances) =>
        [.. chances.Select((chance, i) => chance.NewEvent(worlds, $"{i}"))];

    private static Figure[] ByRole(Players players, Func<int, Figure> figureOf)
    {
        var known = new Dictionary<object, Figure>();
        return [.. Enumerable.Range(0, players.Names.Count).Select(player =>
        {
            object role = players.RoleOf(player);
            if (!known.TryGetValue(role, out Figure? figure))
            {
                known.Add(role, figure = figureOf(player));
            }

            return figure;
        })];
    }

    private static Figure[] Pivotal(Players players, Chance common, Solver solver) =>
        Pivotal(players, [.. Enumerable.Repeat(common, players.Names.Count)], solver);

    private static Figure[] Normalize(Figure[] figures)
    {
        Figure sum = figures.Aggregate(Figure.Zero, (total, figure) => total + figure);
        return double.IsNegativeInfinity(sum.Log)
            ? throw new LeftOutException("no player is ever pivotal")
            : [.. figures.Select(figure => figure / sum)];
    }

    // The integral over p of the pivotal probability when all have chance p (Owen's multilinear extension); a polynomial of degree
    // n - 1, for which Gauss-Legendre quadrature of order n/2 or more is exact.
    private static Figure[] Shapley(Players players, Solver solver)
    {
        int needed = Math.Max(2, (players.Names.Count + 1) / 2);
        int order = s_quadratureOrders.FirstOrDefault(o => o >= needed);
        if (order == 0)
        {
            throw new LeftOutException($"more than {2 * s_quadratureOrders[^1]:N0} players");
        }

        var rule = new GaussLegendreRule(0, 1, order);
        return ByRole(players, player => Integral(player, makesTrue: true) - Integral(player, makesTrue: false));

        Figure Integral(int player, bool makesTrue)
        {
            Func<double, Figure> pivotal = solver.OverChances(chance => Pivot(player, makesTrue, chance));
            return Enumerable.Range(0, order)
                .Aggregate(Figure.Zero, (sum, i) => sum + (rule.GetWeight(i) * pivotal(rule.GetAbscissa(i))));
        }

        (Lineage Lineage, IReadOnlyList<Lineage> Events) Pivot(int player, bool makesTrue, Chance chance)
        {
            var worlds = new WorldSpace();
            Lineage[] events = NewEvents(worlds, [.. Enumerable.Repeat(chance, players.Names.Count)]);
            (Lineage toTrue, Lineage toFalse) = players.Pivot(worlds, events, player, solver);
            return (makesTrue ? toTrue : toFalse, events);
        }
    }

    /// <summary>Whose importance is asked, and when each is pivotal.</summary>
    private abstract class Players
    {
        public abstract IReadOnlyList<string> Names { get; }

        public abstract IReadOnlyList<Chance> Chances { get; }

        /// <summary>Players of the same role are exchangeable if all chances are equal.</summary>
        public abstract object RoleOf(int player);

        public abstract (Lineage MakesTrue, Lineage MakesFalse) Pivot(WorldSpace worlds, Lineage[] variables, int player, Solver solver);
    }

    private sealed class Formula : Players
    {
        private readonly Field _formula;
        private readonly string[] _names;

        public Formula(Field input)
        {
            (string Name, Field Value)[] variables = [.. input["variables"].Members()];
            _formula = input["formula"];
            _names = [.. variables.Select(variable => variable.Name)];
            Chances = [.. variables.Select(variable => variable.Value.Chance)];
        }

        public override IReadOnlyList<string> Names => _names;

        public override IReadOnlyList<Chance> Chances { get; }

        public override object RoleOf(int player) => player;

        public override (Lineage MakesTrue, Lineage MakesFalse) Pivot(
            WorldSpace worlds, Lineage[] variables, int player, Solver solver)
        {
            Lineage With(Lineage value) => new ExpressionReader(worlds, _names
                .Select((name, i) => (name, i == player ? value : variables[i]))
                .ToDictionary(pair => pair.name, pair => pair.Item2)).Read(_formula);
            Lineage ifTrue = With(worlds.Always);
            Lineage ifFalse = With(worlds.Never);
            return (ifTrue & !ifFalse, ifFalse & !ifTrue);
        }
    }

    private sealed class Game : Players
    {
        private readonly int[] _weights;
        private readonly int _quota;

        public Game(Field game)
        {
            _weights = [.. game["weights"].Items().Select(weight => weight.Integer(0, int.MaxValue))];
            _quota = game["quota"].Integer(int.MinValue, int.MaxValue);
            Names = game.Optional("names") is { } names
                ? [.. names.Items().Select(name => name.Text)]
                : [.. _weights.Select((_, i) => i.ToString(CultureInfo.InvariantCulture))];
            if (Names.Count != _weights.Length)
            {
                throw game["names"].Wrong($"a list of {_weights.Length} names");
            }
        }

        public override IReadOnlyList<string> Names { get; }

        public override IReadOnlyList<Chance> Chances => [.. Enumerable.Repeat(Chance.Half, Names.Count)];

        public override object RoleOf(int player) => _weights[player];

        // The others reach the quota with the player and not without.
        public override (Lineage MakesTrue, Lineage MakesFalse) Pivot(WorldSpace worlds, Lineage[] variables, int player, Solver solver)
        {
            var others = new List<(long, Lineage)[]>();
            for (int i = 0; i < variables.Length; i++)
            {
                if (i != player)
                {
                    others.Add([(_weights[i], variables[i])]);
                }
            }

            return (new SumSweep(others, (long)_quota - _weights[player], (long)_quota - 1).Build(worlds, solver), worlds.Never);
        }
    }
}
