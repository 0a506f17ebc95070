using System.Diagnostics;
using System.Globalization;
using Uncertain.Numerics;

namespace Uncertain;

/// <summary>
/// The values that an aggregate has in some world, ascending, with their probabilities, and how they were obtained. Immutable.
/// </summary>
/// <remarks>
/// <para>Every probability it gives carries its own guarantee. Where <see cref="Guarantee"/> is exact, both tails of all of them keep
/// 1e-12 relative. Counts of more than 1,024 events and sums of such size leave out values whose probability is below about 1e-280; what
/// is asked of those comes as certain bounds.</para>
/// <para>A sampled distribution has, with the stated confidence, every P(X &lt;= x) right within the accuracy asked for, all at once; a
/// probability of one value or between two is then right within twice that.</para>
/// </remarks>
/// <typeparam name="TValue">Type of the values.</typeparam>
[DebuggerDisplay("{ToString(),nq}")]
public sealed partial class Distribution<TValue>
{
    // 1e-12, with a digit to spare.
    private const double Digits = 1e13;

    private readonly TValue[] _values;
    private readonly ExtendedDouble[] _masses;

    // Of each value: the mass at it and below, and the mass above it.
    private readonly ExtendedDouble[] _upTo;
    private readonly ExtendedDouble[] _above;
    private readonly ExtendedDouble _none;

    // Upper bounds of the mass that is missing: at the listed values, and in all.
    private readonly double _blur;
    private readonly double _slack;
    private readonly double _epsilon;

    private Distribution(
        List<(TValue Value, ExtendedDouble Mass)> masses, ExtendedDouble none, double omitted, double blur, double epsilon, Guarantee guarantee,
        string evaluator, ulong? seed, Cost cost, string? shortfall)
    {
        (_values, _masses) = Merge(masses);
        _none = none;
        _blur = blur;
        _slack = omitted + blur;
        _epsilon = epsilon;
        Guarantee = guarantee;
        Evaluator = evaluator;
        Seed = seed;
        Cost = cost;
        Shortfall = shortfall;
        _upTo = new ExtendedDouble[_values.Length];
        _above = new ExtendedDouble[_values.Length];
        ExtendedDouble sum = default;
        for (int i = 0; i < _values.Length; i++)
        {
            _upTo[i] = sum += _masses[i];
        }

        sum = default;
        for (int i = _values.Length - 1; i >= 0; i--)
        {
            _above[i] = sum;
            sum += _masses[i];
        }
    }

    /// <summary>The values, ascending.</summary>
    public IReadOnlyList<TValue> Values => _values;

    /// <summary>The chance that there is no value: that the group is empty, or has fewer elements than needed. 0 for counts and sums.</summary>
    public Probability NoValue => Figure(_none, HasValueMass, 1);

    /// <summary>What is promised of the probabilities.</summary>
    public Guarantee Guarantee { get; }

    /// <summary>Name of the evaluator that obtained the distribution.</summary>
    public string Evaluator { get; }

    /// <summary>The seed that gives the same figures again; null where nothing was drawn.</summary>
    public ulong? Seed { get; }

    /// <summary>What the distribution cost.</summary>
    public Cost Cost { get; }

    /// <summary>In which way it is less than what was asked, and why; null where it delivers all that was asked.</summary>
    public string? Shortfall { get; }

    private ExtendedDouble HasValueMass => _values.Length == 0 ? default : _upTo[^1];

    /// <summary>The values with their probabilities, ascending.</summary>
    public IEnumerable<(TValue Value, Probability Probability)> Entries()
    {
        for (int i = 0; i < _values.Length; i++)
        {
            yield return (_values[i], At(i));
        }
    }

    /// <summary>The probability of one value.</summary>
    /// <param name="value">The value.</param>
    public Probability ProbabilityOf(TValue value)
    {
        int place = Place(value);
        return place >= 0 ? At(place) : Figure(default, ExtendedDouble.MultiplicativeIdentity, 2);
    }

    /// <summary>The probability that there is a value and it is at most a bound: the distribution function.</summary>
    /// <param name="bound">The bound.</param>
    public Probability AtMost(TValue bound) => Below(CountUpTo(bound));

    /// <summary>The probability that there is a value and it is less than a bound.</summary>
    /// <param name="bound">The bound.</param>
    public Probability LessThan(TValue bound) => Below(CountBelow(bound));

    /// <summary>The probability that there is a value and it is more than a bound.</summary>
    /// <param name="bound">The bound.</param>
    public Probability MoreThan(TValue bound) => From(CountUpTo(bound));

    /// <summary>The probability that there is a value and it is at least a bound.</summary>
    /// <param name="bound">The bound.</param>
    public Probability AtLeast(TValue bound) => From(CountBelow(bound));

    /// <summary>The probability that there is a value and it lies between two bounds, both included.</summary>
    /// <param name="low">The lower bound.</param>
    /// <param name="high">The upper bound.</param>
    public Probability Between(TValue low, TValue high)
    {
        int start = CountBelow(low);
        int end = Math.Max(start, CountUpTo(high));
        ExtendedDouble inside = default;
        for (int i = start; i < end; i++)
        {
            inside += _masses[i];
        }

        ExtendedDouble outside = _none;
        outside += start == 0 ? default : _upTo[start - 1];
        outside += end == 0 ? (_values.Length == 0 ? default : _above[0] + _masses[0]) : _above[end - 1];
        return Figure(inside, outside, 2);
    }

    internal static Distribution<TValue> Exact(
        List<(TValue Value, ExtendedDouble Mass)> masses, ExtendedDouble none, double omitted, double blur, string evaluator,
        Cost cost) => new(masses, none, omitted, blur, 0, Guarantee.Exact, evaluator, null, cost, null);

    internal static Distribution<TValue> Sampled(
        List<(TValue Value, long Worlds)> counts, long none, double epsilon, double delta, ulong seed, Cost cost, string? shortfall)
    {
        ExtendedDouble world = ExtendedDouble.From(1.0 / cost.Samples);
        return new Distribution<TValue>(
            counts.ConvertAll(entry => (entry.Value, ExtendedDouble.From(entry.Worlds) * world)), ExtendedDouble.From(none) * world, 0, 0,
            epsilon, Guarantee.Confidence(delta), "sampling", seed, cost, shortfall);
    }

    private static (TValue[] Values, ExtendedDouble[] Masses) Merge(List<(TValue Value, ExtendedDouble Mass)> masses)
    {
        Comparer<TValue> comparer = Comparer<TValue>.Default;
        var values = new List<TValue>(masses.Count);
        var merged = new List<ExtendedDouble>(masses.Count);
        bool isSorted = true;
        for (int i = 1; i < masses.Count && isSorted; i++)
        {
            isSorted = comparer.Compare(masses[i - 1].Value, masses[i].Value) < 0;
        }

        foreach ((TValue value, ExtendedDouble mass) in isSorted ? masses : (IEnumerable<(TValue Value, ExtendedDouble Mass)>)masses.OrderBy(entry => entry.Value, comparer))
        {
            if (values.Count > 0 && comparer.Compare(values[^1], value) == 0)
            {
                merged[^1] += mass;
            }
            else
            {
                values.Add(value);
                merged.Add(mass);
            }
        }

        return ([.. values], [.. merged]);
    }

    private Probability At(int place)
    {
        ExtendedDouble rest = _none + _above[place];
        return Figure(_masses[place], place == 0 ? rest : rest + _upTo[place - 1], 2, _blur);
    }

    // The first so many values.
    private Probability Below(int count) => Figure(
        count == 0 ? default : _upTo[count - 1],
        _none + (count == 0 ? HasValueMass : _above[count - 1]),
        _none.IsZero ? 1 : 2);

    // All but the first so many values.
    private Probability From(int count) => Figure(
        count == 0 ? HasValueMass : _above[count - 1],
        count == 0 ? _none : _none + _upTo[count - 1],
        1);

    private Probability Figure(ExtendedDouble yes, ExtendedDouble no, int sides, double? missing = null)
    {
        double value = Math.Min(1, yes.ToDouble());
        double complement = Math.Min(1, no.ToDouble());
        if (Guarantee.Kind == GuaranteeKind.Confidence)
        {
            double distance = sides * _epsilon;
            Probability estimate = Probability.Estimated(
                value, Math.Max(0, value - distance), Math.Min(1, value + distance), Guarantee.Delta, Evaluator, Seed!.Value, Cost,
                complement);
            return Shortfall is null ? estimate : estimate.WithShortfall(Shortfall);
        }

        return value >= Digits * (missing ?? _slack) && complement >= Digits * _slack
            ? Probability.Exact(new Tails<ExtendedDouble>(yes, no), Evaluator, Cost)
            : Probability.Between(value < 0.5 ? value : 1 - Math.Min(1, complement + _slack), Math.Min(1, value + (missing ?? _slack)), Evaluator, Cost);
    }

    private int CountUpTo(TValue bound)
    {
        int place = Place(bound);
        return place >= 0 ? place + 1 : ~place;
    }

    private int CountBelow(TValue bound)
    {
        int place = Place(bound);
        return place >= 0 ? place : ~place;
    }

    private int Place(TValue value) => Array.BinarySearch(_values, value, Comparer<TValue>.Default);

    /// <summary>
    /// One line: how many values, their range, mean and standard deviation where they are numbers, the chance of no value, the guarantee.
    /// </summary>
    public override string ToString()
    {
        if (_values.Length == 0)
        {
            return $"no value ({Guarantee})";
        }

        string range = _values.Length == 1 ? $"{Text(_values[0])}" : $"{Text(_values[0])} to {Text(_values[^1])}";
        string moments = Numbers.Are<TValue>()
            ? string.Create(CultureInfo.InvariantCulture, $", mean {Expectation:G4} ± {StandardDeviation:G3}")
            : "";
        string none = _none.IsZero
            ? ""
            : string.Create(CultureInfo.InvariantCulture, $", no value {_none.ToDouble():G4}");
        string mark = Shortfall is null ? "" : ", less than asked";
        return string.Create(
            CultureInfo.InvariantCulture,
            $"{range}{moments}{none}, {_values.Length:N0} {(_values.Length == 1 ? "value" : "values")} ({Guarantee}{mark})");
    }

    private static string Text(TValue value) => string.Create(CultureInfo.InvariantCulture, $"{value}");
}
