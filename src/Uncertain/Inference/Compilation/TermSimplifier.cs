namespace Uncertain.Inference.Compilation;

/// <summary>
/// Makes terms consistent, distinct and free of absorbed ones: a term that contains another term is not needed.
/// </summary>
internal sealed class TermSimplifier(AtomTable atoms, Workspace workspace, CompilationBudget budget)
{
    // Absorption helps and is not needed; comparing all pairs of a bad list is not worth it.
    private const int ComparisonsPerLiteral = 32;

    /// <summary>The simplified list. A list with an empty term is true and comes back as that term alone.</summary>
    public TermList Simplify(TermList terms)
    {
        var consistent = new TermList(terms.Count, terms.LiteralCount);
        for (int i = 0; i < terms.Count; i++)
        {
            consistent.AddTerm(terms[i]);
            if (!MakeConsistent(consistent))
            {
                consistent.RemoveLast();
            }
            else if (consistent[consistent.Count - 1].IsEmpty)
            {
                var always = new TermList();
                always.EndTerm();
                return always;
            }

            budget.Step();
        }

        return Absorb(consistent);
    }

    /// <summary>Sorts the last term and applies contradiction and exclusivity; false if it holds in no world.</summary>
    private bool MakeConsistent(TermList terms)
    {
        Span<int> literals = terms.Writable(terms.Count - 1);
        literals.Sort();
        int kept = 0;
        bool hasMany = false;
        for (int i = 0; i < literals.Length; i++)
        {
            int literal = literals[i];
            if (kept > 0 && literals[kept - 1] == literal)
            {
                continue;
            }

            if (kept > 0 && (literals[kept - 1] ^ literal) == 1)
            {
                return false;
            }

            hasMany |= atoms.IsManyOutcome(atoms.Variable(literal >> 1));
            literals[kept++] = literal;
        }

        literals = literals[..kept];
        if (hasMany && !ApplyExclusivity(literals, ref kept))
        {
            return false;
        }

        terms.CutLast(kept);
        return true;
    }

    private bool ApplyExclusivity(Span<int> literals, ref int kept)
    {
        var chosen = new HashSet<int>();
        foreach (int literal in literals)
        {
            int variable = atoms.Variable(literal >> 1);
            if ((literal & 1) == 0 && atoms.IsManyOutcome(variable) && !chosen.Add(variable))
            {
                return false;
            }
        }

        kept = 0;
        foreach (int literal in literals)
        {
            if ((literal & 1) == 0 || !chosen.Contains(atoms.Variable(literal >> 1)))
            {
                literals[kept++] = literal;
            }
        }

        return true;
    }

    private TermList Absorb(TermList terms)
    {
        int[] order = ByLength(terms);
        int[] occurrences = workspace.LiteralCount;
        for (int i = 0; i < order.Length; i++)
        {
            budget.Step();
            foreach (int literal in terms[i])
            {
                occurrences[literal]++;
            }
        }

        var seen = new TermSet(terms);
        var kept = new List<int>(terms.Count);
        var watch = new Dictionary<int, List<int>>();
        long comparisonsLeft = (long)ComparisonsPerLiteral * (terms.LiteralCount + 64);
        int watched = 0;
        for (int at = 0; at < order.Length; at++)
        {
            int term = order[at];
            budget.Step();

            // Only strictly shorter terms can absorb; those of this length wait until it is done.
            if (at > 0 && terms[term].Length > terms[order[at - 1]].Length)
            {
                for (; watched < kept.Count; watched++)
                {
                    Watch(terms, kept[watched], occurrences, watch);
                }
            }

            if (seen.Add(term) && (watch.Count == 0 || !IsAbsorbed(terms, term, watch, ref comparisonsLeft)))
            {
                kept.Add(term);
            }
        }

        foreach (int literal in terms.Literals)
        {
            occurrences[literal] = 0;
        }

        if (kept.Count == terms.Count)
        {
            return terms;
        }

        // In the order of the input, which often follows the data's structure.
        kept.Sort();
        var result = new TermList(kept.Count, terms.LiteralCount);
        foreach (int term in kept)
        {
            result.AddTerm(terms[term]);
        }

        return result;
    }

    /// <summary>The terms, the shortest first; those of one length in the order of the input.</summary>
    private static int[] ByLength(TermList terms)
    {
        int longest = 0;
        for (int i = 0; i < terms.Count; i++)
        {
            longest = Math.Max(longest, terms[i].Length);
        }

        int[] next = new int[longest + 2];
        for (int i = 0; i < terms.Count; i++)
        {
            next[terms[i].Length + 1]++;
        }

        for (int length = 1; length < next.Length; length++)
        {
            next[length] += next[length - 1];
        }

        int[] order = new int[terms.Count];
        for (int i = 0; i < order.Length; i++)
        {
            order[next[terms[i].Length]++] = i;
        }

        return order;
    }

    private static void Watch(TermList terms, int term, int[] occurrences, Dictionary<int, List<int>> watch)
    {
        int rarest = terms[term][0];
        foreach (int literal in terms[term])
        {
            rarest = occurrences[literal] < occurrences[rarest] ? literal : rarest;
        }

        if (!watch.TryGetValue(rarest, out List<int>? list))
        {
            watch.Add(rarest, list = []);
        }

        list.Add(term);
    }

    private bool IsAbsorbed(TermList terms, int term, Dictionary<int, List<int>> watch, ref long comparisonsLeft)
    {
        int[] mark = workspace.LiteralMark;
        int stamp = workspace.NextStamp();
        foreach (int literal in terms[term])
        {
            mark[literal] = stamp;
        }

        foreach (int literal in terms[term])
        {
            if (!watch.TryGetValue(literal, out List<int>? candidates))
            {
                continue;
            }

            foreach (int candidate in candidates)
            {
                if (--comparisonsLeft < 0)
                {
                    return false;
                }

                bool contained = true;
                foreach (int inner in terms[candidate])
                {
                    contained &= mark[inner] == stamp;
                }

                if (contained)
                {
                    return true;
                }
            }
        }

        return false;
    }
}
