namespace Uncertain.Inference.Sampling;

/// <summary>Workers that share ranges of worlds. Counts are integers, so their sums do not depend on who did what.</summary>
/// <param name="create">Makes a worker; called at most once for each thread.</param>
/// <param name="threads">Largest number of workers.</param>
/// <param name="pieceSize">Worlds that a worker takes at a time; a multiple of 64.</param>
internal sealed class Team(Func<IWorker> create, int threads, long pieceSize)
{
    // Below this many pieces, about a millisecond, starting a thread takes as long as it saves.
    private const int PiecesWorthAHelper = 8;

    private readonly IWorker?[] _workers = new IWorker?[threads];

    /// <summary>Evaluates a range of worlds.</summary>
    /// <param name="from">First world; a multiple of 64.</param>
    /// <param name="to">World after the last one.</param>
    /// <returns>Whether the range was finished.</returns>
    public bool Run(long from, long to)
    {
        long pieces = (to - from + pieceSize - 1) / pieceSize;
        long next = -1;
        bool stopped = false;
        var helpers = new Task[(int)Math.Clamp(pieces / PiecesWorthAHelper, 0, threads - 1)];
        for (int i = 0; i < helpers.Length; i++)
        {
            int number = i + 1;

            // A stage may take long: threads of its own, so that the pool stays free for timers and continuations.
            helpers[i] = Task.Factory.StartNew(
                () => Work(number), CancellationToken.None, TaskCreationOptions.LongRunning, TaskScheduler.Default);
        }

        Work(0);
        Task.WaitAll(helpers);
        return !stopped;

        void Work(int number)
        {
            long piece;
            while (!Volatile.Read(ref stopped) && (piece = Interlocked.Increment(ref next)) < pieces)
            {
                IWorker worker = _workers[number] ??= create();
                long start = from + (piece * pieceSize);
                if (!worker.Run(start, Math.Min(to, start + pieceSize)))
                {
                    Volatile.Write(ref stopped, true);
                }
            }
        }
    }

    /// <summary>Worlds in which lineage number <paramref name="index"/> held, in all ranges so far.</summary>
    public long Successes(int index)
    {
        long sum = 0;
        foreach (IWorker? worker in _workers)
        {
            sum += worker is null ? 0 : worker.Successes[index];
        }

        return sum;
    }
}
