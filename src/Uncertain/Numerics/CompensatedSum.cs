namespace Uncertain.Numerics;

/// <summary>A sum of doubles of any signs that carries its rounding errors along.</summary>
/// <remarks>A. Neumaier, "Rundungsfehleranalyse einiger Verfahren zur Summation endlicher Summen", ZAMM 54, 1974.</remarks>
internal struct CompensatedSum
{
    private double _sum;
    private double _error;

    public readonly double Value => _sum + _error;

    public void Add(double number)
    {
        double sum = _sum + number;
        _error += Math.Abs(_sum) >= Math.Abs(number) ? (_sum - sum) + number : (number - sum) + _sum;
        _sum = sum;
    }
}
