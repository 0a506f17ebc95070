using Uncertain.Inference.Safe.Analysis;
using Uncertain.Inference.Safe.Steps;
using Uncertain.Planning;

namespace Uncertain.Inference.Safe;

/// <summary>
/// Finds a safe plan: an order of joins and projections in which every projection merges independent or exclusive events and every
/// join multiplies independent ones.
/// </summary>
/// <remarks>
/// After N. Dalvi and D. Suciu, "Efficient query evaluation on probabilistic databases", VLDB Journal 16 (2007), for conjunctive queries
/// with keys, and the same authors with C. Ré for exclusive alternatives ("Probabilistic databases: diamonds in the dirt", CACM 52(7),
/// 2009); unions and differences of parts over different sources are independent. Complete for hierarchical queries without self-joins;
/// what it refuses may still have a polynomial evaluation that this planner does not know.
/// </remarks>
internal static class SafePlanner
{
    /// <summary>A plan that gives the head variables of a scope.</summary>
    /// <exception cref="NoSafePlanException">There is none; the message is the reason.</exception>
    public static SafeStep Plan(Scope scope, IEnumerable<Field> head) => Build(scope.Parts, [.. head]);

    private static SafeStep Build(IReadOnlyList<Part> parts, HashSet<Field> head)
    {
        HashSet<Field> all = [.. parts.SelectMany(part => part.Variables)];
        List<Field> asked = [.. all.Where(head.Contains)];
        HashSet<Field> known = Closure(parts, asked, all);
        List<Field> open = [.. all.Where(variable => !known.Contains(variable))];
        if (known.Count > asked.Count)
        {
            return new DropStep(Build(parts, known), asked);
        }

        List<List<Part>> groups = Connect(parts, open);
        return open.Count == 0 || groups.Count > 1
            ? Combine(parts, groups, known, open)
            : Eliminate(parts, known, open);
    }

    // What follows from the known variables by keys. Where a source joined with it determines y by its x, a source that has x only is as
    // good as one that has both.
    private static HashSet<Field> Closure(IReadOnlyList<Part> parts, IEnumerable<Field> asked, HashSet<Field> all)
    {
        HashSet<Field> known = [.. asked];
        bool grown = true;
        while (grown)
        {
            grown = false;
            foreach (SourcePart source in parts.OfType<SourcePart>())
            {
                if (!source.Variables.IsSubsetOf(known) && source.IsDeterminedBy(known))
                {
                    known.UnionWith(source.Variables);
                    grown = true;
                }
            }
        }

        known.IntersectWith(all);
        return known;
    }

    // Parts that share an open variable, directly or through others, belong together.
    private static List<List<Part>> Connect(IReadOnlyList<Part> parts, List<Field> open)
    {
        var groups = new List<(List<Part> Parts, HashSet<Field> Open)>();
        foreach (Part part in parts)
        {
            var merged = (Parts: new List<Part> { part }, Open: part.Variables.Intersect(open).ToHashSet());
            foreach ((List<Part> Parts, HashSet<Field> Open) group in groups.ToArray())
            {
                if (group.Open.Overlaps(merged.Open))
                {
                    merged.Parts.InsertRange(0, group.Parts);
                    merged.Open.UnionWith(group.Open);
                    groups.Remove(group);
                }
            }

            groups.Add(merged);
        }

        return groups.ConvertAll(group => group.Parts);
    }

    // Parts that share known variables only are independent: join those that give rows, then filter.
    private static SafeStep Combine(IReadOnlyList<Part> parts, List<List<Part>> groups, HashSet<Field> known, List<Field> open)
    {
        List<SafeStep> producers = [.. groups
            .Where(group => group.Exists(part => part.ProducesRows))
            .Select(group => group is [var single] && single.Variables.IsSubsetOf(known)
                ? Whole(single)
                : Eliminate(WithGuards(group, parts), known, open))];
        if (producers.Count == 0)
        {
            throw new NoSafePlanException("a part of the query only excludes rows and gives none");
        }

        SafeStep result = producers[0];
        producers.RemoveAt(0);
        while (producers.Count > 0)
        {
            SafeStep next = producers.Find(step => step.Variables.Intersect(result.Variables).Any()) ?? producers[0];
            producers.Remove(next);
            result = new JoinStep(result, next);
        }

        foreach (Part part in groups.Where(group => !group.Exists(part => part.ProducesRows)).SelectMany(group => group))
        {
            result = part is ConditionPart condition
                ? new FilterStep(result, condition.Condition)
                : new WithoutStep(result, Absent((AbsencePart)part));
        }

        return result;
    }

    // A condition or absence in one group may look at known variables of another: sources read as certain bring them in.
    private static List<Part> WithGuards(List<Part> group, IReadOnlyList<Part> parts)
    {
        HashSet<Field> missing = [.. group.SelectMany(part => part.Variables)];
        missing.ExceptWith(group.Where(part => part.ProducesRows).SelectMany(part => part.Variables));
        List<Part> result = [.. group];
        foreach (SourcePart source in parts.OfType<SourcePart>().Where(source => source.Variables.Overlaps(missing)))
        {
            result.Add(source.AsGuard());
            missing.ExceptWith(source.Variables);
        }

        return missing.Count == 0
            ? result
            : throw new NoSafePlanException(
                $"a condition or difference on {Names(missing)} of a union depends on other parts of the query; apply it to the union's sides");
    }

    private static SafeStep Whole(Part part) => part is SourcePart source
        ? new ScanStep(source, part.Variables)
        : Union((UnionPart)part, part.Variables);

    private static SafeStep Absent(AbsencePart absence) => Plan(absence.Of, absence.Variables);

    private static UnionStep Union(UnionPart union, IEnumerable<Field> variables)
    {
        List<Field> columns = [.. variables];
        return new UnionStep(Plan(union.Left, columns), Plan(union.Right, columns), columns);
    }

    // One group of parts connected by open variables, of all that are open in the query. Every way out makes more variables known or
    // leaves fewer parts, so planning ends.
    private static SafeStep Eliminate(IReadOnlyList<Part> parts, HashSet<Field> allKnown, List<Field> allOpen)
    {
        HashSet<Field> used = [.. parts.SelectMany(part => part.Variables)];
        HashSet<Field> known = [.. allKnown.Where(used.Contains)];
        List<Field> open = allOpen.FindAll(used.Contains);
        if (parts is [var only])
        {
            List<Field> columns = [.. only.Variables.Where(known.Contains)];
            if (only is UnionPart union)
            {
                return Union(union, columns);
            }

            // One source: what is not asked for is merged while reading, unless alternatives of several groups would meet.
            if (only is SourcePart source && (!source.IsExclusive || source.Group.IsSubsetOf(known)))
            {
                return new ScanStep(source, columns);
            }
        }

        List<SourcePart> chancy = [.. parts.SelectMany(part => part.Chancy)];
        HashSet<Field> all = [.. known, .. open];
        List<Field> separators = [.. open.Where(variable => chancy.TrueForAll(
            source => Closure(parts, source.Independent, all).Contains(variable)))];
        if (separators.Count > 0)
        {
            return new ProjectStep(Build(parts, [.. known, .. separators]), known);
        }

        SourcePart? choice = parts.OfType<SourcePart>().FirstOrDefault(source =>
            source.IsExclusive && source.Group.IsSubsetOf(known) && source.Variables.Overlaps(open));
        if (choice is not null)
        {
            List<Part> beside = [choice.AsGuard(), .. parts.Where(part => part != choice)];
            return new ChoiceStep(
                new ScanStep(choice, choice.Variables), Build(beside, [.. known, .. choice.Variables]), known);
        }

        throw new NoSafePlanException(ReasonFor(
            chancy, open, (source, variable) => Closure(parts, source.Variables, all).Contains(variable)));
    }

    private static string ReasonFor(List<SourcePart> chancy, List<Field> open, Func<SourcePart, Field, bool> dependsOn)
    {
        foreach (Field first in open)
        {
            foreach (Field second in open)
            {
                List<SourcePart> ofFirst = chancy.FindAll(source => dependsOn(source, first));
                List<SourcePart> ofSecond = chancy.FindAll(source => dependsOn(source, second));
                SourcePart? common = ofFirst.Find(ofSecond.Contains);
                if (common is not null && ofFirst.Except(ofSecond).Any() && ofSecond.Except(ofFirst).Any())
                {
                    return $"not hierarchical: {first.Name} and {second.Name} overlap on {common.Source.Name}";
                }
            }
        }

        foreach (Field variable in open)
        {
            SourcePart? loose = chancy.Find(source => source.IsExclusive && !source.Group.Contains(variable));
            if (loose is not null && chancy.TrueForAll(source => dependsOn(source, variable)))
            {
                return $"not independent over {variable.Name}: the alternatives of one {Names(loose.Group)} of {loose.Source.Name} "
                    + $"differ in it and exclude each other";
            }
        }

        return $"no field is common to {string.Join(", ", chancy.Select(source => source.Source.Name).Distinct())}, which depend on each "
            + $"other through {Names(open)}";
    }

    private static string Names(IEnumerable<Field> fields) => string.Join(", ", fields.Select(field => field.Name));
}
