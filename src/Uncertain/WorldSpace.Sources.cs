using System.Linq.Expressions;
using System.Runtime.CompilerServices;
using Uncertain.Lineages;
using Uncertain.Worlds;

namespace Uncertain;

/// <content>Sources: records with chances, alternatives or lineages.</content>
public sealed partial class WorldSpace
{
    /// <summary>A set whose records are there in every world.</summary>
    /// <param name="records">The records; read once, now.</param>
    /// <param name="key">What identifies a record, for example <c>l => l.LotCode</c>; checked, and used to find safe plans.</param>
    /// <param name="name">The set's name in plans and lineages; by default the text of the first argument.</param>
    /// <exception cref="InvalidInputException">Two records have the same key, or a lambda threw.</exception>
    public UncertainSet<T> Certain<T>(
        IEnumerable<T> records, Expression<Func<T, object?>>? key = null,
        [CallerArgumentExpression(nameof(records))] string? name = null)
    {
        T[] copy = SourceReader<T>.Read(records);
        name = SourceReader.NameOf(name, typeof(T));
        SourceReader.CheckKey(copy, key, name);
        return Create(name, SourceKind.Certain, copy, LineageColumn.Certain, null, key);
    }

    /// <summary>A set whose records are there or not, each independently of all else.</summary>
    /// <param name="records">The records; read once, now. Equal records count as separate evidence for one element.</param>
    /// <param name="chance">
    /// A record's chance in [0, 1]; 0 and 1 cost no variable. Called once for each record, in order; a lambda that captures nothing may be
    /// called for several records at a time.
    /// </param>
    /// <param name="key">What identifies a record; checked, and used to find safe plans.</param>
    /// <param name="name">The set's name in plans and lineages; by default the text of the first argument.</param>
    /// <exception cref="InvalidInputException">A chance is not in [0, 1], two records have the same key, or a lambda threw.</exception>
    public UncertainSet<T> Independent<T>(
        IEnumerable<T> records, Func<T, double> chance, Expression<Func<T, object?>>? key = null,
        [CallerArgumentExpression(nameof(records))] string? name = null)
    {
        ArgumentNullException.ThrowIfNull(chance);
        name = SourceReader.NameOf(name, typeof(T));
        var read = SourceReader<T>.WithChances(records, chance, name);
        SourceReader.CheckKey(read.Records, key, name);
        return Create(name, SourceKind.Independent, read.Records, AddIndependent(read.Chances, read.AreUncertain, name), null, key);
    }

    /// <summary>
    /// A set in which at most one record of each group is there, and none of them with what is left of 1. Groups are independent.
    /// </summary>
    /// <param name="records">The records; read once, now.</param>
    /// <param name="group">What records exclude each other have in common, for example <c>r => r.NoteId</c>; never null.</param>
    /// <param name="chance">A record's chance in [0, 1]; at most 1 over a group.</param>
    /// <param name="key">What identifies a record among all of them; checked, and used to find safe plans.</param>
    /// <param name="name">The set's name in plans and lineages; by default the text of the first argument.</param>
    /// <exception cref="InvalidInputException">
    /// A chance is not in [0, 1], a group adds up to more than 1 or is null, two records have the same key, or a lambda threw.
    /// </exception>
    public UncertainSet<T> Alternatives<T, TGroup>(
        IEnumerable<T> records, Expression<Func<T, TGroup>> group, Func<T, double> chance, Expression<Func<T, object?>>? key = null,
        [CallerArgumentExpression(nameof(records))] string? name = null)
    {
        ArgumentNullException.ThrowIfNull(group);
        ArgumentNullException.ThrowIfNull(chance);
        name = SourceReader.NameOf(name, typeof(T));
        (T[] copy, double[] chances, _) = SourceReader<T>.WithChances(records, chance, name);
        AlternativeGroups groups = SourceReader.Groups(copy, group, chances, name);
        SourceReader.CheckKey(copy, key, name);
        return Create(name, SourceKind.Alternatives, copy, LineageColumn.Given(AddAlternatives(chances, groups, name)), group, key);
    }

    /// <summary>A set whose records have lineages of the caller's: shared events, or answers of other queries.</summary>
    /// <param name="records">The records; read once, now.</param>
    /// <param name="lineage">A record's lineage; of this world space.</param>
    /// <param name="name">The set's name in plans; by default the text of the first argument.</param>
    /// <exception cref="WorldSpaceMismatchException">A lineage belongs to another world space.</exception>
    /// <exception cref="InvalidInputException">A lineage is <c>default</c>, or the lambda threw.</exception>
    public UncertainSet<T> WithLineage<T>(
        IEnumerable<T> records, Func<T, Lineage> lineage, [CallerArgumentExpression(nameof(records))] string? name = null)
    {
        ArgumentNullException.ThrowIfNull(lineage);
        T[] copy = SourceReader<T>.Read(records);
        name = SourceReader.NameOf(name, typeof(T));
        Lineage[] given = SourceReader.Lineages(copy, lineage, this, name);
        var lineages = new LineageRef[copy.Length];
        lock (Gate)
        {
            // One import for all lineages of an evaluation: they share parts.
            var imports = new Dictionary<LineageArena, LineageImport>();
            for (int i = 0; i < given.Length; i++)
            {
                if (!given[i].Ref.IsNode || given[i].Arena == Arena)
                {
                    lineages[i] = given[i].Ref;
                    continue;
                }

                if (!imports.TryGetValue(given[i].Arena, out LineageImport? import))
                {
                    imports.Add(given[i].Arena, import = new LineageImport(given[i].Arena, Arena));
                }

                lineages[i] = import.Copy(given[i].Ref);
            }
        }

        return Create(name, SourceKind.Formulas, copy, LineageColumn.Given(lineages), null, null);
    }

    /// <summary>Reads an asynchronous sequence to its end and makes a set as <see cref="Certain{T}"/> does.</summary>
    /// <inheritdoc cref="Certain{T}"/>
    /// <param name="records">The records.</param>
    /// <param name="key">What identifies a record.</param>
    /// <param name="cancellationToken">Cancels the reading; nothing is added then.</param>
    /// <param name="name">The set's name in plans and lineages.</param>
    public async Task<UncertainSet<T>> CertainAsync<T>(
        IAsyncEnumerable<T> records, Expression<Func<T, object?>>? key = null, CancellationToken cancellationToken = default,
        [CallerArgumentExpression(nameof(records))] string? name = null) =>
        Certain(await SourceReader.ReadAsync(records, cancellationToken).ConfigureAwait(false), key, name);

    /// <summary>Reads an asynchronous sequence to its end and makes a set as <see cref="Independent{T}"/> does.</summary>
    /// <inheritdoc cref="Independent{T}"/>
    /// <param name="records">The records.</param>
    /// <param name="chance">A record's chance in [0, 1].</param>
    /// <param name="key">What identifies a record.</param>
    /// <param name="cancellationToken">Cancels the reading; nothing is added then.</param>
    /// <param name="name">The set's name in plans and lineages.</param>
    public async Task<UncertainSet<T>> IndependentAsync<T>(
        IAsyncEnumerable<T> records, Func<T, double> chance, Expression<Func<T, object?>>? key = null,
        CancellationToken cancellationToken = default, [CallerArgumentExpression(nameof(records))] string? name = null) =>
        Independent(await SourceReader.ReadAsync(records, cancellationToken).ConfigureAwait(false), chance, key, name);

    /// <summary>Reads an asynchronous sequence to its end and makes a set as <see cref="Alternatives{T, TGroup}"/> does.</summary>
    /// <inheritdoc cref="Alternatives{T, TGroup}"/>
    /// <param name="records">The records.</param>
    /// <param name="group">What records that exclude each other have in common.</param>
    /// <param name="chance">A record's chance in [0, 1]; at most 1 over a group.</param>
    /// <param name="key">What identifies a record among all of them.</param>
    /// <param name="cancellationToken">Cancels the reading; nothing is added then.</param>
    /// <param name="name">The set's name in plans and lineages.</param>
    public async Task<UncertainSet<T>> AlternativesAsync<T, TGroup>(
        IAsyncEnumerable<T> records, Expression<Func<T, TGroup>> group, Func<T, double> chance,
        Expression<Func<T, object?>>? key = null, CancellationToken cancellationToken = default,
        [CallerArgumentExpression(nameof(records))] string? name = null) =>
        Alternatives(await SourceReader.ReadAsync(records, cancellationToken).ConfigureAwait(false), group, chance, key, name);

    private UncertainSet<T> Create<T>(
        string name, SourceKind kind, T[] records, LineageColumn lineages, LambdaExpression? group, LambdaExpression? key) =>
        new(new SourceNode<T>(this, name, kind, records, lineages, group, key));

    private LineageColumn AddIndependent(double[] chances, bool areUncertain, string name)
    {
        if (areUncertain)
        {
            lock (Gate)
            {
                int slots = Variables.AddEach(chances);
                Names.AddSource(slots, name, null);
                return LineageColumn.Consecutive(slots);
            }
        }

        var recordOfSlot = new List<int>(chances.Length);
        for (int i = 0; i < chances.Length; i++)
        {
            if (chances[i] is not (0 or 1))
            {
                recordOfSlot.Add(i);
            }
        }

        int[] uncertain = [.. recordOfSlot];
        LineageRef[] lineages = Array.ConvertAll(chances, chance => chance == 1 ? LineageRef.True : LineageRef.False);
        lock (Gate)
        {
            int first = Variables.AddEach(Array.ConvertAll(uncertain, i => chances[i]));
            Names.AddSource(first, name, uncertain);
            for (int i = 0; i < uncertain.Length; i++)
            {
                lineages[uncertain[i]] = LineageRef.Literal(first + i);
            }

            return LineageColumn.Given(lineages);
        }
    }

    private LineageRef[] AddAlternatives(double[] chances, AlternativeGroups groups, string name)
    {
        var lineages = new LineageRef[chances.Length];
        lock (Gate)
        {
            int first = Variables.SlotCount;
            var recordOfSlot = new List<int>(chances.Length);
            for (int group = 0; group < groups.Count; group++)
            {
                ReadOnlySpan<int> members = groups.Members(group);
                LineageRef[] literals = AddGroup(groups.ChancesOf(group));
                for (int i = 0; i < members.Length; i++)
                {
                    lineages[members[i]] = literals[i];
                    if (literals[i].IsLiteral)
                    {
                        recordOfSlot.Add(members[i]);
                    }
                }
            }

            Names.AddSource(first, name, [.. recordOfSlot]);
        }

        return lineages;
    }
}
