using System.Collections.Immutable;
using System.Numerics;
using System.Reflection;
using System.Runtime.CompilerServices;
using System.Runtime.InteropServices;
using Uncertain.Execution;

namespace Uncertain.Worlds;

/// <summary>
/// Reads the records of a source into an array that nobody else can change: an immutable array is taken as it is, other arrays and lists
/// are copied by several threads, piece by piece, each piece's chances computed while it is in the processor's cache.
/// </summary>
internal static class SourceReader<T>
{
    private const int Piece = 2048;

    // Fewer records are not worth a thread.
    private const int LeastRecords = 65_536;

    private static readonly int s_threads = Environment.ProcessorCount;

    public static T[] Read(IEnumerable<T> records)
    {
        (T[] copy, bool isFilled) = Begin(records);
        if (!isFilled)
        {
            int ranges = Workers.Ranges(s_threads, copy.Length, LeastRecords);
            Workers.Run(s_threads, ranges, (_, range) => Copy(
                records, copy, Workers.Start(copy.Length, ranges, range), Workers.Start(copy.Length, ranges, range + 1)));
        }

        return copy;
    }

    /// <summary>Records, their chances, and whether none of these is 0 or 1.</summary>
    /// <exception cref="InvalidInputException">A chance is not in [0, 1], or the lambda threw; names the first such record.</exception>
    public static (T[] Records, double[] Chances, bool AreUncertain) WithChances(
        IEnumerable<T> records, Func<T, double> chance, string name)
    {
        (T[] copy, bool isFilled) = Begin(records);
        double[] chances = GC.AllocateUninitializedArray<double>(copy.Length);
        int certain = 0;
        int threads = CapturesNothing(chance) ? s_threads : 1;
        int ranges = Workers.Ranges(threads, copy.Length, LeastRecords);
        Workers.Run(threads, ranges, (_, range) =>
        {
            int end = Workers.Start(copy.Length, ranges, range + 1);
            for (int start = Workers.Start(copy.Length, ranges, range); start < end; start += Piece)
            {
                int length = Math.Min(Piece, end - start);
                if (!isFilled)
                {
                    Copy(records, copy, start, start + length);
                }

                Compute(copy, chance, chances, start, start + length, name);
                if (!AreInside(chances.AsSpan(start, length)))
                {
                    Check(copy, chances, start, start + length, name);
                    Volatile.Write(ref certain, 1);
                }
            }
        });
        return (copy, chances, certain == 0);
    }

    // The array for the records, and whether it has them already.
    private static (T[] Copy, bool IsFilled) Begin(IEnumerable<T> records)
    {
        ArgumentNullException.ThrowIfNull(records);
        return records switch
        {
            ImmutableArray<T> { IsDefault: false } immutable => (ImmutableCollectionsMarshal.AsArray(immutable)!, true),
            T[] array => (Room(array.Length), false),
            List<T> list when list.GetType() == typeof(List<T>) => (Room(list.Count), false),
            _ => ([.. records], true),
        };
    }

    private static T[] Room(int length) => RuntimeHelpers.IsReferenceOrContainsReferences<T>()
        ? new T[length]
        : GC.AllocateUninitializedArray<T>(length);

    private static void Copy(IEnumerable<T> records, T[] copy, int start, int end)
    {
        if (records is T[] array)
        {
            Array.Copy(array, start, copy, start, end - start);
        }
        else
        {
            ((List<T>)records).CopyTo(start, copy, start, end - start);
        }
    }

    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    private static void Compute(T[] records, Func<T, double> chance, double[] chances, int start, int end, string name)
    {
        int i = start;
        try
        {
            for (; i < end; i++)
            {
                chances[i] = chance(records[i]);
            }
        }
        catch (Exception exception) when (exception is not UncertainException)
        {
            // One before it may be no chance, which comes first.
            Check(records, chances, start, i, name);
            throw SourceReader.Failed(exception, "chance", i, name, records[i]);
        }
    }

    // Whether all are between 0 and 1, neither of them.
    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    private static bool AreInside(ReadOnlySpan<double> chances)
    {
        ReadOnlySpan<Vector<double>> vectors = MemoryMarshal.Cast<double, Vector<double>>(chances);
        var inside = Vector<long>.AllBitsSet;
        foreach (Vector<double> chance in vectors)
        {
            inside &= Vector.GreaterThan(chance, Vector<double>.Zero) & Vector.LessThan(chance, Vector<double>.One);
        }

        bool all = inside == Vector<long>.AllBitsSet;
        foreach (double chance in chances[(vectors.Length * Vector<double>.Count)..])
        {
            all &= chance > 0 && chance < 1;
        }

        return all;
    }

    private static void Check(T[] records, double[] chances, int start, int end, string name)
    {
        for (int i = start; i < end; i++)
        {
            if (!(chances[i] >= 0 && chances[i] <= 1))
            {
                throw Chances.Refused(chances[i], $"record {i} of {name} ('{records[i]}')");
            }
        }
    }

    // A lambda that captures nothing is a method of an object without fields, so calls do not meet in anything that it holds.
    private static bool CapturesNothing(Func<T, double> chance) =>
        chance.HasSingleTarget
        && (chance.Target is null
            || (chance.Target.GetType() is { } type && type.BaseType == typeof(object)
                && type.GetFields(BindingFlags.Instance | BindingFlags.Public | BindingFlags.NonPublic).Length == 0));
}
