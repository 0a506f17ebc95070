using System.Runtime.Intrinsics;
using Uncertain.Numerics;

namespace Uncertain.Inference.Compilation.Buckets;

/// <summary>
/// The chances of a few disjunctions of terms, together, under one setting of the chances of variables and without a compiled form:
/// variables are eliminated one after the other, over tables of all states of the variables that still hang together with them.
/// </summary>
/// <remarks>
/// <para>R. Dechter, "Bucket elimination: a unifying framework for reasoning", Artificial Intelligence 113 (1999). A table has,
/// for each state of its variables and each set of lists, the chance that just these lists have a term that holds, of the terms met
/// so far; all are sums of products of non-negative numbers. Buckets are worked off branch by branch, so that few tables exist at a time, in one array
/// used as a stack.</para>
/// <para>Cost: see <see cref="BucketPlan"/>; linear in the number of variables at a fixed width.</para>
/// </remarks>
internal sealed class BucketElimination
{
    private const int StatesPerStep = 64;

    private readonly TermNetwork _network;
    private readonly BucketPlan _plan;
    private readonly FormValues _values;
    private readonly AtomTable _atoms;
    private readonly CompilationBudget _budget;
    private readonly ExtendedColumn[] _columns;
    private readonly int[] _bucketOf;
    private readonly int[] _offsets;
    private readonly int[] _firstTerm;
    private readonly int[] _termsOf;
    private readonly BucketPlaces _places;
    private readonly FourExtended[] _left;
    private readonly FourExtended[] _right;
    private readonly List<(int Mask, int Pattern)> _excluded = [];
    private int _top;

    private BucketElimination(
        TermNetwork network, BucketPlan plan, AtomTable atoms, FormValues values, CompilationBudget budget)
    {
        _network = network;
        _plan = plan;
        _atoms = atoms;
        _values = values;
        _budget = budget;
        _columns = new ExtendedColumn[1 << network.ListCount];
        for (int set = 0; set < _columns.Length; set++)
        {
            _columns[set] = new ExtendedColumn((int)plan.Peak + (2 * FourExtended.Count));
        }

        _places = new BucketPlaces(plan);
        _left = new FourExtended[_columns.Length];
        _right = new FourExtended[_columns.Length];
        _bucketOf = new int[network.VertexCount];
        Array.Fill(_bucketOf, -1);
        _offsets = new int[network.VertexCount];
        _firstTerm = new int[network.VertexCount + 1];
        _termsOf = new int[network.TermCount];
        PlaceTerms();
    }

    /// <summary>Bytes that a run takes.</summary>
    public static long Bytes(TermNetwork network, BucketPlan plan) =>
        ((long)ExtendedColumn.BytesPerPlace * plan.Peak << network.ListCount) + (12L * network.VertexCount) + (8L * network.TermCount);

    /// <summary>
    /// What a run costs, in states of one list: two tables meet in one product for each pair of sets and one more sum.
    /// </summary>
    public static double Cost(TermNetwork network, BucketPlan plan) => plan.Cost * Math.Pow(3, network.ListCount - 1);

    /// <summary>
    /// For each set of lists, as bits, the chance that these have a term that holds and the others have none.
    /// </summary>
    public static ExtendedDouble[] Run(
        TermNetwork network, BucketPlan plan, AtomTable atoms, FormValues values, CompilationBudget budget) =>
        new BucketElimination(network, plan, atoms, values, budget).Run();

    private ExtendedDouble[] Run()
    {
        var total = new FourExtended[_columns.Length];
        Array.Fill(total, FourExtended.Zero);
        total[0] = FourExtended.One;
        for (int term = 0; term < _network.TermCount; term++)
        {
            if (_network.Shared(term).IsEmpty)
            {
                ListSets.Apply(total, OwnChance(term), 1 << _network.List(term));
            }
        }

        foreach (int vertex in _plan.Order)
        {
            _budget.Step();
            int separator = SetOffsets(vertex);
            int states = 1 << (separator + _plan.Bits[vertex]);
            if (_bucketOf[vertex] < 0)
            {
                _bucketOf[vertex] = _top;
                Clear(_top, states);
            }

            int bucket = _bucketOf[vertex];
            for (int i = _firstTerm[vertex]; i < _firstTerm[vertex + 1]; i++)
            {
                Apply(_termsOf[i], bucket, states);
            }

            SumOut(vertex, bucket, 1 << separator);
            int parent = _plan.Parents[vertex];
            if (parent < 0)
            {
                ListSets.Multiply(total, Array.ConvertAll(_columns, column => column[bucket]));
                _top = bucket;
            }
            else
            {
                HandOver(vertex, bucket, parent);
            }
        }

        return Array.ConvertAll(total, four => four.Lane(0));
    }

    // A term belongs to the first of its vertices to go.
    private void PlaceTerms()
    {
        var home = new int[_network.TermCount];
        for (int term = 0; term < home.Length; term++)
        {
            int first = -1;
            foreach (int literal in _network.Shared(term))
            {
                int vertex = _network.Vertex(literal);
                first = first < 0 || _plan.Position(vertex) < _plan.Position(first) ? vertex : first;
            }

            home[term] = first;
            if (first >= 0)
            {
                _firstTerm[first]++;
            }
        }

        int sum = 0;
        for (int vertex = 0; vertex < _firstTerm.Length; vertex++)
        {
            sum += _firstTerm[vertex];
            _firstTerm[vertex] = sum;
        }

        for (int term = home.Length - 1; term >= 0; term--)
        {
            if (home[term] >= 0)
            {
                _termsOf[--_firstTerm[home[term]]] = term;
            }
        }
    }

    /// <summary>Lays out the bits of a bucket: its own vertex highest, the last to go lowest. Returns the bits of the others.</summary>
    private int SetOffsets(int vertex)
    {
        ReadOnlySpan<int> separator = _plan.Separator(vertex);
        int offset = 0;
        for (int i = separator.Length - 1; i >= 0; i--)
        {
            _offsets[separator[i]] = offset;
            offset += _plan.Bits[separator[i]];
        }

        _offsets[vertex] = offset;
        return offset;
    }

    private void Clear(int bucket, int states)
    {
        for (int state = 0; state < states; state += FourExtended.Count)
        {
            for (int set = 0; set < _columns.Length; set++)
            {
                _columns[set][bucket + state] = set == 0 ? FourExtended.One : FourExtended.Zero;
            }

            Pause(state);
        }

        _top = bucket + Math.Max(FourExtended.Count, states);
    }

    private Tails<ExtendedDouble> OwnChance(int term)
    {
        Tails<ExtendedDouble> own = Tails<ExtendedDouble>.Always;
        foreach (int literal in _network.Own(term))
        {
            own &= _values.Of(_atoms.Edge(literal >> 1) ^ (literal & 1));
        }

        return own;
    }

    /// <summary>In the states that a term matches, it holds if what it has of its own does.</summary>
    private void Apply(int term, int bucket, int states)
    {
        int list = 1 << _network.List(term);
        (int mask, int pattern) = Match(term);
        Tails<ExtendedDouble> own = OwnChance(term);
        FourExtended happens = FourExtended.Create(own.True);
        FourExtended fails = FourExtended.Create(own.False);
        const int Lanes = FourExtended.Count - 1;
        Vector256<long> lanes = Vector256.Equals(
            Vector256.Create(0L, 1, 2, 3) & Vector256.Create((long)(mask & Lanes)), Vector256.Create((long)(pattern & Lanes)));
        int high = mask & ~Lanes;
        int state = 0;
        do
        {
            int at = state | (pattern & ~Lanes);
            Vector256<long> matches = _excluded.Count == 0 ? lanes : WithoutExcluded(lanes, at);
            for (int set = 0; set < _columns.Length; set++)
            {
                if ((set & list) == 0)
                {
                    FourExtended without = _columns[set][bucket + at];
                    FourExtended with = _columns[set | list][bucket + at];
                    _columns[set][bucket + at] = FourExtended.Select(matches, without * fails, without);
                    _columns[set | list][bucket + at] = FourExtended.Select(matches, with + (without * happens), with);
                }
            }

            Pause(state);

            // The next number with nothing in the mask and the lanes.
            state = ((state | high | Lanes) + 1) & ~(high | Lanes);
        }
        while (state < states);
    }

    private (int Mask, int Pattern) Match(int term)
    {
        _excluded.Clear();
        int mask = 0;
        int pattern = 0;
        foreach (int literal in _network.Shared(term))
        {
            int vertex = _network.Vertex(literal);
            int own = ((1 << _plan.Bits[vertex]) - 1) << _offsets[vertex];
            int state = _network.State(literal) << _offsets[vertex];
            if ((literal & 1) != 0 && _plan.Bits[vertex] > 1)
            {
                _excluded.Add((own, state));
                continue;
            }

            mask |= own;
            pattern |= (literal & 1) != 0 ? 0 : state;
        }

        return (mask, pattern);
    }

    private Vector256<long> WithoutExcluded(Vector256<long> lanes, int at)
    {
        Vector256<long> states = Vector256.Create((long)at, at + 1, at + 2, at + 3);
        foreach ((int mask, int pattern) in _excluded)
        {
            lanes = Vector256.AndNot(lanes, Vector256.Equals(states & Vector256.Create((long)mask), Vector256.Create((long)pattern)));
        }

        return lanes;
    }

    /// <summary>Adds up over the states of the vertex, which are the blocks of its bucket.</summary>
    private void SumOut(int vertex, int bucket, int block)
    {
        FourExtended[] weights = Weights(vertex);
        for (int state = 0; state < block; state += FourExtended.Count)
        {
            foreach (ExtendedColumn column in _columns)
            {
                FourExtended sum = weights[0] * column[bucket + state];
                for (int outcome = 1; outcome < weights.Length; outcome++)
                {
                    sum += weights[outcome] * column[bucket + (outcome * block) + state];
                }

                column[bucket + state] = sum;
            }

            Pause(state);
        }
    }

    private FourExtended[] Weights(int vertex)
    {
        ReadOnlySpan<int> outcomes = _network.Outcomes(vertex);
        int variable = _network.Variable(vertex);
        if (!_atoms.IsManyOutcome(variable))
        {
            Tails<ExtendedDouble> tails = _values.Of(_atoms.Edge(outcomes[0]));
            return [FourExtended.Create(tails.False), FourExtended.Create(tails.True)];
        }

        int[] slots = new int[outcomes.Length];
        for (int i = 0; i < slots.Length; i++)
        {
            slots[i] = _atoms.Slot(outcomes[i]);
        }

        ExtendedDouble[] chances = _values.Weights(new FormDistribution(_atoms.ManyOutcome(variable), slots));
        var weights = new FourExtended[chances.Length];
        for (int i = 0; i < slots.Length; i++)
        {
            weights[i + 1] = FourExtended.Create(chances[i]);
        }

        weights[0] = FourExtended.Create(chances[^1]);
        return weights;
    }

    /// <summary>What is left of a bucket goes to the one of its parent, which it opens if it is the first.</summary>
    private void HandOver(int vertex, int bucket, int parent)
    {
        int states = _places.Fill(vertex, parent);
        int target = _bucketOf[parent];
        if (target < 0)
        {
            // From the last to the first it can be spread over its own place: no state moves down.
            for (int state = states - 1; state > 0; state--)
            {
                foreach (ExtendedColumn column in _columns)
                {
                    column.Copy(bucket + _places[state], bucket + state);
                }

                Pause(state);
            }

            _bucketOf[parent] = bucket;
            _top = bucket + Math.Max(FourExtended.Count, states);
            return;
        }

        for (int state = 0; state < states; state += FourExtended.Count)
        {
            for (int set = 0; set < _columns.Length; set++)
            {
                _left[set] = _columns[set][target + state];
                _right[set] = Spread(_columns[set], bucket, state);
            }

            ListSets.Multiply(_left, _right);
            for (int set = 0; set < _columns.Length; set++)
            {
                _columns[set][target + state] = _left[set];
            }

            Pause(state);
        }

        _top = bucket;
    }

    private FourExtended Spread(ExtendedColumn column, int bucket, int state)
    {
        (int a, int b, int c, int d) =
            (bucket + _places[state], bucket + _places[state + 1], bucket + _places[state + 2], bucket + _places[state + 3]);
        return d == a + 3 ? column[a] : column.Gather(a, b, c, d);
    }

    private void Pause(int state)
    {
        if ((state & (StatesPerStep - 1)) == 0)
        {
            _budget.Step();
        }
    }
}
