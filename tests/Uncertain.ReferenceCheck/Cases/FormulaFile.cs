using System.Globalization;
using Uncertain.ReferenceCheck.Solving;

namespace Uncertain.ReferenceCheck.Cases;

/// <summary>
/// Reads a plain text formula: <c>p dnf VARS TERMS</c> or <c>p cnf VARS CLAUSES</c>, then VARS probabilities, then the terms
/// or clauses as variable numbers, negative for negated, each ended by 0.
/// </summary>
internal static class FormulaFile
{
    public static ReferenceCase Read(TextReader reader, string name)
    {
        var tokens = new TokenReader(reader);
        tokens.Expect("p", "'p', the start of 'p dnf VARS TERMS' or 'p cnf VARS CLAUSES'");
        string form = tokens.Next("'dnf' or 'cnf'");
        if (form is not ("dnf" or "cnf"))
        {
            throw tokens.Wrong(form, "'dnf' or 'cnf'");
        }

        int variables = Count(tokens, "the number of variables");
        int parts = Count(tokens, form == "dnf" ? "the number of terms" : "the number of clauses");
        var chances = new List<Chance>();
        while (chances.Count < variables)
        {
            chances.Add(ReadChance(tokens, chances.Count + 1));
        }

        List<int> literals = ReadLiterals(tokens, variables, parts, form == "dnf" ? "term" : "clause");
        return new ReferenceCase(name, solver => [solver.Chance(Build(chances, literals, form == "dnf", solver))], null);
    }

    private static int Count(TokenReader tokens, string what)
    {
        string token = tokens.Next(what);
        return int.TryParse(token, NumberStyles.None, CultureInfo.InvariantCulture, out int count)
            ? count
            : throw tokens.Wrong(token, $"{what}, an integer from 0 to {int.MaxValue}");
    }

    private static Chance ReadChance(TokenReader tokens, int variable)
    {
        string what = $"the probability of variable {variable}";
        string token = tokens.Next(what);
        if (!Rational.TryParse(token, out Rational exact) || exact.Sign < 0 || (Rational.One - exact).Sign < 0)
        {
            throw tokens.Wrong(token, $"{what}, a number from 0 to 1");
        }

        return Chance.Of(exact);
    }

    // All terms in one list, each ended by its 0.
    private static List<int> ReadLiterals(TokenReader tokens, int variables, int parts, string part)
    {
        var literals = new List<int>();
        for (int i = 1; i <= parts; i++)
        {
            int literal;
            do
            {
                string what = $"a literal of {part} {i} of {parts}, or the 0 that ends it";
                string token = tokens.Next(what);
                if (!int.TryParse(token, NumberStyles.AllowLeadingSign, CultureInfo.InvariantCulture, out literal)
                    || literal < -variables || literal > variables)
                {
                    throw tokens.Wrong(token, $"{what}, an integer from {-variables} to {variables}");
                }

                literals.Add(literal);
            }
            while (literal != 0);
        }

        if (tokens.TryNext() is { } extra)
        {
            throw tokens.Wrong(extra, $"the end of the file after {parts} {part}s");
        }

        return literals;
    }

    private static Lineage Build(List<Chance> chances, List<int> literals, bool isDisjunctive, Solver solver)
    {
        var worlds = new WorldSpace();
        Lineage[] variables = [.. chances.Select((chance, i) => chance.NewEvent(worlds, $"x{i + 1}"))];
        var part = new List<Lineage>();
        var parts = new List<Lineage> { isDisjunctive ? worlds.Never : worlds.Always };
        foreach (int literal in literals)
        {
            if (literal != 0)
            {
                part.Add(literal > 0 ? variables[literal - 1] : !variables[-literal - 1]);
                continue;
            }

            // Of no literal: a term is true, a clause false.
            part.Add(isDisjunctive ? worlds.Always : worlds.Never);
            parts.Add(isDisjunctive ? Lineage.All([.. part]) : Lineage.Any([.. part]));
            part.Clear();
            solver.Checkpoint();
        }

        return isDisjunctive ? Lineage.Any([.. parts]) : Lineage.All([.. parts]);
    }
}
