using System.Globalization;
using System.Text;
using Uncertain.Numerics;

namespace Uncertain;

/// <content>Moments, quantiles and the plot.</content>
public sealed partial class Distribution<TValue>
{
    /// <summary>The mean over the worlds in which there is a value; of a sampled distribution the estimate of it.</summary>
    /// <exception cref="InvalidOperationException">The values are not numbers, or there is no value in any world.</exception>
    public double Expectation
    {
        get
        {
            var sum = default(CompensatedSum);
            double total = Weight();
            for (int i = 0; i < _values.Length; i++)
            {
                sum.Add(Numbers.ToDouble(_values[i]) * _masses[i].ToDouble());
            }

            return sum.Value / total;
        }
    }

    /// <summary>The variance over the worlds in which there is a value; of a sampled distribution the estimate of it.</summary>
    /// <exception cref="InvalidOperationException">The values are not numbers, or there is no value in any world.</exception>
    public double Variance
    {
        get
        {
            double mean = Expectation;
            var sum = default(CompensatedSum);
            double total = Weight();
            for (int i = 0; i < _values.Length; i++)
            {
                double deviation = Numbers.ToDouble(_values[i]) - mean;
                sum.Add(deviation * deviation * _masses[i].ToDouble());
            }

            return sum.Value / total;
        }
    }

    /// <summary>The square root of <see cref="Variance"/>.</summary>
    /// <exception cref="InvalidOperationException">The values are not numbers, or there is no value in any world.</exception>
    public double StandardDeviation => Math.Sqrt(Variance);

    /// <summary>The least value x for which, where there is a value, it is at most x with at least the given probability.</summary>
    /// <param name="level">In (0, 1); 0.5 gives the median.</param>
    /// <exception cref="InvalidOperationException">There is no value in any world.</exception>
    public TValue Quantile(double level)
    {
        Check(level);
        double total = Weight();
        int place = First(i => _upTo[i].ToDouble() >= level * total);

        // Close to 1 the other tail has more digits.
        return level > 0.5 ? _values[First(i => _above[i].ToDouble() <= (1 - level) * total)] : _values[place];
    }

    /// <summary>The values between which the quantile lies under <see cref="Guarantee"/>; twice the same where it is exact.</summary>
    /// <param name="level">In (0, 1).</param>
    /// <exception cref="InvalidOperationException">There is no value in any world.</exception>
    public (TValue Low, TValue High) QuantileRange(double level)
    {
        if (Guarantee.Kind == GuaranteeKind.Exact)
        {
            return (Quantile(level), Quantile(level));
        }

        Check(level);
        double total = Weight();
        double width = _none.IsZero ? 0 : _epsilon;
        int low = First(i => Below(i + 1).Upper >= level * Math.Max(0, total - width));
        int high = First(i => Below(i + 1).Lower >= level * Math.Min(1, total + width));
        return (_values[low], _values[high]);
    }

    /// <summary>The values that cut off half of the rest on either side: where there is a value, it lies between them with at least
    /// the given probability.</summary>
    /// <param name="mass">In (0, 1); 0.9 gives the 5 % and the 95 % quantile.</param>
    /// <exception cref="InvalidOperationException">There is no value in any world.</exception>
    public (TValue Low, TValue High) Interval(double mass)
    {
        Check(mass);
        double tail = (1 - mass) / 2;
        return (Quantile(tail), Quantile(1 - tail));
    }

    /// <summary>The distribution as bars of text, one line for each value or range of values, for a console.</summary>
    /// <param name="rows">Largest number of lines, at least 1; neighbouring values share a line where there are more of them.</param>
    /// <param name="width">Length of the longest bar, at least 1.</param>
    public string Plot(int rows = 20, int width = 40)
    {
        ArgumentOutOfRangeException.ThrowIfLessThan(rows, 1);
        ArgumentOutOfRangeException.ThrowIfLessThan(width, 1);
        var lines = new List<(string Label, double Mass)>();
        if (!_none.IsZero)
        {
            lines.Add(("no value", _none.ToDouble()));
        }

        // Values far out on either side would leave no room for the rest.
        int start = 0;
        int end = _values.Length;
        if (end > rows)
        {
            start = First(i => _upTo[i].ToDouble() > 1e-4);
            end = Math.Max(start, First(i => _above[i].ToDouble() <= 1e-4)) + 1;
        }

        int share = Math.Max(1, (end - start + rows - 1) / rows);
        for (int i = start; i < end; i += share)
        {
            int last = Math.Min(end, i + share) - 1;
            double mass = 0;
            for (int j = i; j <= last; j++)
            {
                mass += _masses[j].ToDouble();
            }

            lines.Add((last == i ? Text(_values[i]) : $"{Text(_values[i])} .. {Text(_values[last])}", mass));
        }

        int labels = lines.Count == 0 ? 0 : lines.Max(line => line.Label.Length);
        double most = lines.Count == 0 ? 1 : lines.Max(line => line.Mass);
        var text = new StringBuilder();
        foreach ((string label, double mass) in lines)
        {
            int length = most == 0 ? 0 : (int)Math.Round(width * mass / most);
            text.Append(label.PadLeft(labels)).Append("  ").Append('█', length).Append(length == 0 ? "▏" : "")
                .Append(CultureInfo.InvariantCulture, $" {mass:G3}").Append('\n');
        }

        double outside = (start == 0 ? 0 : _upTo[start - 1].ToDouble()) + (end == 0 ? 0 : _above[end - 1].ToDouble());
        if (outside > 0)
        {
            text.Append(CultureInfo.InvariantCulture, $"{"outside".PadLeft(labels)}  {outside:G3}").Append('\n');
        }

        return text.Append(CultureInfo.InvariantCulture, $"({Guarantee}{(Shortfall is null ? "" : ", less than asked")})\n").ToString();
    }

    private static void Check(double level)
    {
        if (!(level > 0 && level < 1))
        {
            throw new ArgumentOutOfRangeException(nameof(level), level, "A level must be in (0, 1), for example 0.5 for the median.");
        }
    }

    // The first place for which a condition holds that stays true from there on; the last place if none.
    private int First(Func<int, bool> condition)
    {
        int low = 0;
        int high = _values.Length - 1;
        while (low < high)
        {
            int middle = (low + high) / 2;
            (low, high) = condition(middle) ? (low, middle) : (middle + 1, high);
        }

        return low;
    }

    private double Weight() => _values.Length > 0
        ? HasValueMass.ToDouble()
        : throw new InvalidOperationException(
            "There is no value in any world, so there is no mean and no quantile. Look at NoValue first.");
}
