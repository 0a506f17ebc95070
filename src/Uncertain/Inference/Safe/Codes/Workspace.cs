using System.Numerics;
using System.Runtime.CompilerServices;
using Uncertain.Inference.Safe.Steps;

namespace Uncertain.Inference.Safe.Codes;

/// <summary>
/// Arrays for the tables of one run or one part of it. They are handed out one by one and taken back all at once, so the next part of a
/// run works in memory that is in the processor's cache. Used by one thread at a time.
/// </summary>
internal sealed class Workspace
{
    // So much is kept for the thread's next run.
    private const long MostKept = 1 << 20;

    [ThreadStatic]
    private static Workspace? t_kept;

    private readonly List<Shelf> _shelves = [];
    private RunControl _control = null!;
    private long _bytes;

    private Workspace()
    {
    }

    public RunControl Control => _control;

    /// <summary>A workspace for a run; to be given back by <see cref="Return"/>.</summary>
    public static Workspace Take(RunControl control)
    {
        Workspace result = t_kept ?? new Workspace();
        t_kept = null;
        result._control = control;
        control.Reserve(result._bytes);
        return result;
    }

    public void Return()
    {
        _control.Release(_bytes);
        _control = null!;
        TakeBackAll();
        if (_bytes <= MostKept)
        {
            t_kept = this;
        }
    }

    /// <summary>An array of at least the given length, with undefined content.</summary>
    /// <exception cref="EvaluationRefusedException">The memory budget does not allow it.</exception>
    public T[] Rent<T>(int length)
        where T : unmanaged
    {
        foreach (Shelf shelf in _shelves)
        {
            if (shelf is Shelf<T> found)
            {
                return found.Rent(length, this);
            }
        }

        var created = new Shelf<T>();
        _shelves.Add(created);
        return created.Rent(length, this);
    }

    /// <summary>As <see cref="Rent"/>, all zero.</summary>
    public T[] RentZeroed<T>(int length)
        where T : unmanaged
    {
        T[] result = Rent<T>(length);
        Array.Clear(result, 0, length);
        return result;
    }

    /// <summary>Takes back all arrays that were handed out.</summary>
    public void TakeBackAll()
    {
        foreach (Shelf shelf in _shelves)
        {
            shelf.TakeBackAll();
        }
    }

    private abstract class Shelf
    {
        public abstract void TakeBackAll();
    }

    private sealed class Shelf<T> : Shelf
        where T : unmanaged
    {
        // Four sizes for each doubling; arrays in use come first.
        private const int Sizes = 4 * 32;
        private const int LeastLog = 4;

        private readonly List<T[]>?[] _arrays = new List<T[]>?[Sizes];
        private readonly int[] _used = new int[Sizes];

        public T[] Rent(int length, Workspace workspace)
        {
            int log = Math.Max(LeastLog, BitOperations.Log2((uint)Math.Max(1, length)));
            int step = 1 << (log - 2);
            int above = Math.Max(0, length - (1 << log));
            int quarters = (above + step - 1) / step;
            int size = (4 * log) + quarters;
            List<T[]> arrays = _arrays[size] ??= [];
            if (_used[size] == arrays.Count)
            {
                long room = Math.Min((1L << log) + ((long)quarters * step), Array.MaxLength);
                workspace._control.Reserve(room * Unsafe.SizeOf<T>());
                workspace._bytes += room * Unsafe.SizeOf<T>();
                arrays.Add(GC.AllocateUninitializedArray<T>((int)room));
            }

            return arrays[_used[size]++];
        }

        public override void TakeBackAll() => Array.Clear(_used);
    }
}
