using Uncertain.ReferenceCheck.Cases;

namespace Uncertain.ReferenceCheck.Lineages;

/// <summary>
/// The event that all terminals are in one component of the present edges, or that these have no cycle, or both. The state is
/// the partition of the open vertices into components and which of them hold a terminal.
/// </summary>
/// <remarks>
/// A vertex is the character 0 if it is absent, else 1 + 2 c + f for its component's number c, counted by first appearance,
/// and f = 1 if the component holds a terminal.
/// </remarks>
internal sealed class ComponentSweep : FrontierSweep
{
    private const char Absent = '\0';

    private readonly HashSet<int> _terminals;
    private readonly bool _forbidsCycles;
    private readonly int _lastOpening;
    private readonly bool _hasLoneTerminal;

    public ComponentSweep(
        Graph graph, IReadOnlyList<Lineage> edges, IReadOnlyList<Lineage>? vertices, IEnumerable<int> terminals, bool forbidsCycles = false)
        : base(graph, edges, vertices)
    {
        _terminals = [.. terminals];
        _forbidsCycles = forbidsCycles;
        int[] openings = [.. _terminals.Select(OpeningStep)];
        _hasLoneTerminal = openings.Contains(-1);
        _lastOpening = openings.Append(-1).Max();
    }

    protected override string Start => _terminals.Count <= 1
        ? StepCount > 0 && _forbidsCycles ? "" : Yes
        : _hasLoneTerminal ? No : "";

    protected override string Open(int step, string state, int vertex, bool isPresent) =>
        state + (isPresent ? (char)(1 + (2 * (state.Length + 1)) + (_terminals.Contains(vertex) ? 1 : 0)) : Absent);

    protected override string Join(int step, string state, int first, int second)
    {
        char a = state[first];
        char b = state[second];
        if (a == Absent || b == Absent)
        {
            return state;
        }

        if (a == b)
        {
            return _forbidsCycles ? No : state;
        }

        char merged = HoldsTerminal(b) ? b : a;
        string next = Normalize(state.Replace(a, merged).Replace(b, merged));
        return !_forbidsCycles && step >= _lastOpening && TerminalComponents(next) == 1 ? Yes : next;
    }

    protected override string Close(int step, string state, int place, int vertex)
    {
        char own = state[place];
        string rest = state.Remove(place, 1);
        bool closesComponent = own != Absent && !rest.Contains(own);
        return closesComponent && HoldsTerminal(own) && (step < _lastOpening || TerminalComponents(rest) > 0) ? No : Normalize(rest);
    }

    protected override string End(string state) => Yes;

    private static bool HoldsTerminal(char component) => component != Absent && ((component - 1) & 1) == 1;

    private static int TerminalComponents(string state) => state.Where(HoldsTerminal).Distinct().Count();

    private static string Normalize(string state) => string.Create(state.Length, state, static (result, old) =>
    {
        int count = 0;
        for (int i = 0; i < result.Length; i++)
        {
            int earlier = old.IndexOf(old[i]);
            result[i] = old[i] == Absent ? Absent
                : earlier < i ? result[earlier]
                : (char)(1 + (2 * count++) + (HoldsTerminal(old[i]) ? 1 : 0));
        }
    });
}
