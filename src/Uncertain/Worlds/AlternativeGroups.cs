namespace Uncertain.Worlds;

/// <summary>Records sorted by their group of exclusive alternatives, groups in order of first appearance.</summary>
internal sealed class AlternativeGroups
{
    private readonly int[] _ends;
    private readonly int[] _members;
    private readonly double[] _chances;

    public AlternativeGroups(int[] groupOfRecord, int groupCount, double[] chances)
    {
        _ends = new int[groupCount];
        foreach (int group in groupOfRecord)
        {
            _ends[group]++;
        }

        int start = 0;
        for (int group = 0; group < groupCount; group++)
        {
            start += _ends[group];
            _ends[group] = start - _ends[group];
        }

        _members = new int[groupOfRecord.Length];
        _chances = new double[groupOfRecord.Length];
        for (int i = 0; i < groupOfRecord.Length; i++)
        {
            int place = _ends[groupOfRecord[i]]++;
            _members[place] = i;
            _chances[place] = chances[i];
        }
    }

    public int Count => _ends.Length;

    public ReadOnlySpan<int> Members(int group) => _members.AsSpan(Start(group), _ends[group] - Start(group));

    public ReadOnlySpan<double> ChancesOf(int group) => _chances.AsSpan(Start(group), _ends[group] - Start(group));

    private int Start(int group) => group == 0 ? 0 : _ends[group - 1];
}
