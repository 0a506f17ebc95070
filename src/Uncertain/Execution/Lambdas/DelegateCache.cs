using System.Linq.Expressions;

namespace Uncertain.Execution.Lambdas;

/// <summary>
/// Delegates of lambdas, compiled once for all lambdas of one shape in the process: what differs, their constants and the objects that
/// hold captured variables, comes in as an argument. So a query that is built anew from the same C# code compiles nothing.
/// </summary>
/// <remarks>
/// Bounded, and holds types and members only, never a value, a captured variable or a record. Types that may be unloaded are not kept.
/// Captured variables are read when the delegate runs, as a lambda that was compiled by itself would do.
/// </remarks>
internal static class DelegateCache
{
    // A power of two. A program has some hundreds of lambdas; a shape takes about 1 kB with its delegate.
    private const int Places = 1024;

    // A shape is at one of so many neighbouring places.
    private const int Ways = 4;

    private static readonly Entry?[] s_entries = new Entry?[Places + Ways];

    [ThreadStatic]
    private static ShapeReader? t_reader;

    /// <summary>How many shapes can be held at most.</summary>
    public static int Capacity => s_entries.Length;

    /// <summary>How many are held.</summary>
    public static int Count => s_entries.Count(entry => entry is not null);

    /// <summary>The delegate of a lambda.</summary>
    public static Func<T, TResult> Of<T, TResult>(Expression<Func<T, TResult>> lambda)
    {
        if (Find(lambda, out object?[] values) is not { } found)
        {
            return lambda.Compile();
        }

        if (values.Length == 0)
        {
            return (Func<T, TResult>)found;
        }

        var shared = (Func<object?[], T, TResult>)found;
        return argument => shared(values, argument);
    }

    /// <summary>The delegate of a lambda of two arguments.</summary>
    public static Func<T1, T2, TResult> Of<T1, T2, TResult>(Expression<Func<T1, T2, TResult>> lambda)
    {
        if (Find(lambda, out object?[] values) is not { } found)
        {
            return lambda.Compile();
        }

        if (values.Length == 0)
        {
            return (Func<T1, T2, TResult>)found;
        }

        var shared = (Func<object?[], T1, T2, TResult>)found;
        return (first, second) => shared(values, first, second);
    }

    // The delegate of the lambda's shape: with the values as first argument where there are any. Null where the lambda has no shape.
    private static Delegate? Find(LambdaExpression lambda, out object?[] values)
    {
        ShapeReader reader = t_reader ??= new ShapeReader();
        try
        {
            if (!reader.TryRead(lambda))
            {
                values = [];
                return null;
            }

            values = reader.Values;
            var hash = default(HashCode);
            foreach (ShapeToken token in reader.Shape)
            {
                hash.Add(token.Number);
                hash.Add(token.Member);
            }

            int code = hash.ToHashCode();
            int place = code & (Places - 1);
            for (int i = place; i < place + Ways; i++)
            {
                if (Volatile.Read(ref s_entries[i]) is { } entry && entry.Hash == code && reader.Shape.SequenceEqual(entry.Shape))
                {
                    return entry.Delegate;
                }
            }

            Delegate compiled = values.Length == 0 ? lambda.Compile() : ValueTaker.Rewrite(lambda).Compile();
            Keep(new Entry(code, reader.Shape.ToArray(), compiled), place);
            return compiled;
        }
        finally
        {
            reader.Clear();
        }
    }

    private static void Keep(Entry entry, int place)
    {
        if (Array.Exists(entry.Shape, token => token.Member?.IsCollectible == true))
        {
            return;
        }

        // A free place, else one that the shape's own hash picks. Of two threads that come at once one may lose its entry, which costs
        // another compilation and nothing else.
        int taken = place + (int)((uint)entry.Hash / Places % Ways);
        for (int i = place; i < place + Ways; i++)
        {
            if (Volatile.Read(ref s_entries[i]) is null)
            {
                taken = i;
                break;
            }
        }

        Volatile.Write(ref s_entries[taken], entry);
    }

    private sealed record Entry(int Hash, ShapeToken[] Shape, Delegate Delegate);
}
