using Uncertain.ReferenceCheck.Cases;
using Uncertain.ReferenceCheck.Solving;

namespace Uncertain.ReferenceCheck.Questions;

/// <summary>Yes/no questions over independent records, written as queries.</summary>
internal static class QueryQuestion
{
    private const int MostRecords = 4_000_000;

    public static Figure Ask(Field input, Solver solver)
    {
        Figure figure = Evaluate(input, solver);

        // A source takes its chances as doubles, and close to 1 those have lost digits of the complement.
        return HasChanceNearOne(input) ? figure with { Complement = null } : figure;
    }

    private static Figure Evaluate(Field input, Solver solver)
    {
        Field pattern = input["pattern"];
        int n = input["n"].Integer(1, 1_000_000);
        if (pattern.Text == "triangle")
        {
            return solver.Chance(Triangle(new WorldSpace(), n, input["p"]));
        }

        int m = input["m"].Integer(1, 1_000_000);
        var sources = new Sources(new WorldSpace(), input, n, m);
        switch (pattern.Text)
        {
            case "RS":
                return solver.Chance(sources.Start().Any());
            case "RST":
                return solver.Chance(Rst(sources).Any());
            case "H1":
                return solver.Chance(H1(sources).Any());
            case "H2":
                return solver.Chance(H2(sources).Any());
            case "QJ":
                return solver.Chance(Qj(sources).Any());
            case "QW":
                return solver.Chance(Qw(sources));
            default:
                throw pattern.Wrong("RS, RST, H1, H2, QJ, QW or triangle");
        }
    }

    private static bool HasChanceNearOne(Field input)
    {
        IEnumerable<Field> common = ((string[])["p", "p_R", "p_S", "p_T"]).Select(input.Optional).OfType<Field>();
        IEnumerable<Field> listed = input.Optional("S")?.Items().Select(record => record.Items().Last()) ?? [];
        return common.SelectMany(field => field.IsList ? field.Items() : [field]).Concat(listed).Any(field => field.Chance.IsNearOne);
    }

    private static UncertainSet<bool> Rst(Sources sources)
    {
        UncertainSet<Single> units = sources.R;
        UncertainSet<Pair> pairs = sources.S();
        UncertainSet<Single> targets = sources.T(sources.Columns);
        return from r in units
               join s in pairs on r.Value equals s.First
               join t in targets on s.Second equals t.Value
               select true;
    }

    private static UncertainSet<bool> H1(Sources sources)
    {
        UncertainSet<Pair> pairs = sources.S();
        return sources.Start(pairs).Union(sources.End(pairs));
    }

    private static UncertainSet<bool> H2(Sources sources)
    {
        UncertainSet<Pair> first = sources.S();
        UncertainSet<Pair> second = sources.S();
        return sources.Start(first).Union(Both(first, second)).Union(sources.End(second));
    }

    // Two independent conditions over one set: T is on the first attribute, as R is.
    private static UncertainSet<bool> Qj(Sources sources)
    {
        UncertainSet<Pair> pairs = sources.S();
        UncertainSet<bool> left = sources.Start(pairs).Distinct();
        UncertainSet<bool> right = (from t in sources.T(sources.Rows)
                                    join s in pairs on t.Value equals s.First
                                    select true).Distinct();
        return from a in left
               from b in right
               select true;
    }

    private static Lineage Qw(Sources sources)
    {
        UncertainSet<Pair>[] s = [sources.S(), sources.S(), sources.S()];
        Lineage h0 = sources.Start(s[0]).Any().Derive();
        Lineage h1 = Both(s[0], s[1]).Any().Derive();
        Lineage h2 = Both(s[1], s[2]).Any().Derive();
        Lineage h3 = sources.End(s[2]).Any().Derive();
        return (h0 | h2) & (h0 | h3) & (h1 | h3);
    }

    private static YesNoQuestion Triangle(WorldSpace worlds, int n, Field chance)
    {
        double p = chance.Chance.Value;
        Require((long)n * n, chance);
        Pair[] pairs = [.. from x in Enumerable.Range(0, n) from y in Enumerable.Range(0, n) select new Pair(x, y, p)];
        UncertainSet<Pair> first = worlds.Independent(pairs, pair => pair.Chance, name: "R");
        UncertainSet<Pair> second = worlds.Independent(pairs, pair => pair.Chance, name: "S");
        UncertainSet<Pair> third = worlds.Independent(pairs, pair => pair.Chance, name: "T");
        return (from r in first
                join s in second on r.Second equals s.First
                join t in third on new { Start = s.Second, End = r.First } equals new { Start = t.First, End = t.Second }
                select true).Any();
    }

    private static UncertainSet<bool> Both(UncertainSet<Pair> left, UncertainSet<Pair> right) =>
        from a in left
        join b in right on new { a.First, a.Second } equals new { b.First, b.Second }
        select true;

    private static void Require(long records, Field place)
    {
        if (records > MostRecords)
        {
            throw new LeftOutException($"{place.Path}: more than {MostRecords:N0} records");
        }
    }

    private sealed record Single(int Value, double Chance);

    private sealed record Pair(int First, int Second, double Chance);

    private sealed class Sources(WorldSpace worlds, Field input, int rows, int columns)
    {
        private int _pairSets;

        public int Rows => rows;

        public int Columns => columns;

        public UncertainSet<Single> R { get; } = Singles(worlds, input["p_R"], rows, "R");

        public UncertainSet<Single> T(int count) => Singles(worlds, input["p_T"], count, "T");

        /// <summary>A new set of pairs, independent of the others.</summary>
        public UncertainSet<Pair> S()
        {
            string name = $"S{++_pairSets}";
            Pair[] pairs;
            if (input.Optional("S") is { } list)
            {
                pairs = [.. list.Items().Select(ReadPair)];
            }
            else
            {
                Require((long)rows * columns, input["p_S"]);
                double p = input["p_S"].Chance.Value;
                pairs = [.. from x in Enumerable.Range(0, rows) from y in Enumerable.Range(0, columns) select new Pair(x, y, p)];
            }

            return worlds.Independent(pairs, pair => pair.Chance, pair => new { pair.First, pair.Second }, name);
        }

        /// <summary>R(x), S(x, y).</summary>
        public UncertainSet<bool> Start() => Start(S());

        /// <summary>R(x), S(x, y) over a given S.</summary>
        public UncertainSet<bool> Start(UncertainSet<Pair> pairs) =>
            from r in R
            join s in pairs on r.Value equals s.First
            select true;

        /// <summary>S(x, y), T(y).</summary>
        public UncertainSet<bool> End(UncertainSet<Pair> pairs) =>
            from s in pairs
            join t in T(columns) on s.Second equals t.Value
            select true;

        private static UncertainSet<Single> Singles(WorldSpace worlds, Field chances, int count, string name) => worlds.Independent(
            Elements.Chances(chances, count).Select((chance, i) => new Single(i, chance.Value)),
            single => single.Chance, single => single.Value, name);

        private Pair ReadPair(Field field) => field.Items().ToArray() is [var first, var second, var chance]
            ? new Pair(first.Integer(0, rows - 1), second.Integer(0, columns - 1), chance.Chance.Value)
            : throw field.Wrong("a record [x, y, p]");
    }
}
