namespace Uncertain.Inference.Compilation;

/// <summary>
/// Settings of the chances that a form is evaluated under side by side. What no setting changes is read once for all of them.
/// </summary>
internal sealed class SettingGroup
{
    private readonly HashSet<int> _slots = [];
    private readonly HashSet<int> _variables = [];

    /// <param name="settings">The settings.</param>
    /// <param name="first">The first of the group; beyond the last one, that one is repeated.</param>
    /// <param name="lanes">Number of settings side by side.</param>
    public SettingGroup(IReadOnlyList<ChanceSetting> settings, int first, int lanes)
    {
        Settings = new ChanceSetting[lanes];
        for (int lane = 0; lane < lanes; lane++)
        {
            ChanceSetting setting = settings[Math.Min(first + lane, settings.Count - 1)];
            Settings[lane] = setting;
            foreach (int slot in setting.ChangedSlots)
            {
                _slots.Add(slot);
                _variables.Add(setting.VariableOf(slot));
            }
        }
    }

    /// <summary>One for each lane.</summary>
    public ChanceSetting[] Settings { get; }

    /// <summary>Whether all settings agree on an outcome of a two-outcome variable.</summary>
    public bool Agrees(int slot) => !_slots.Contains(slot);

    /// <summary>Whether all settings agree on all outcomes of a variable.</summary>
    public bool AgreesOn(int variable) => !_variables.Contains(variable);
}
