namespace Uncertain.Benchmarks;

/// <content>Answers whose lineages do not factor.</content>
public static partial class Instances
{
    /// <summary>
    /// Answers that each join sets of their own: some R(x), S(x, y) and T(y) are there together, with random pairs of S and different
    /// chances. With a side of 14 and 98 pairs a lineage has about 126 variables and takes
    /// some milliseconds.
    /// </summary>
    /// <param name="answers">How many.</param>
    /// <param name="side">Number of x, and of y, of an answer.</param>
    /// <param name="pairs">Records of S of an answer.</param>
    /// <param name="seed">Of pairs and chances.</param>
    public static UncertainSet<int> HardAnswers(int answers, int side, int pairs, int seed = 1)
    {
        var random = new Random(seed);
        var ends = new List<(int Answer, int End, double Chance)>(answers * side);
        var otherEnds = new List<(int Answer, int End, double Chance)>(answers * side);
        var between = new List<(int Answer, int From, int To, double Chance)>(answers * pairs);
        for (int answer = 0; answer < answers; answer++)
        {
            for (int end = 0; end < side; end++)
            {
                ends.Add((answer, end, Chance()));
                otherEnds.Add((answer, end, Chance()));
            }

            var drawn = new HashSet<(int From, int To)>();
            while (drawn.Count < pairs)
            {
                (int From, int To) pair = (random.Next(side), random.Next(side));
                if (drawn.Add(pair))
                {
                    between.Add((answer, pair.From, pair.To, Chance()));
                }
            }
        }

        var worlds = new WorldSpace();
        return from r in worlds.Independent(ends, r => r.Chance)
               join s in worlds.Independent(between, s => s.Chance) on new { r.Answer, r.End } equals new { s.Answer, End = s.From }
               join t in worlds.Independent(otherEnds, t => t.Chance) on new { s.Answer, End = s.To } equals new { t.Answer, t.End }
               select r.Answer;

        double Chance() => 0.05 + (0.55 * random.NextDouble());
    }
}
