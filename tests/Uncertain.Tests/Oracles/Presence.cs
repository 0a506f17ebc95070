namespace Uncertain.Tests.Oracles;

/// <summary>In which worlds something is there, and the total chances of those worlds and of the others.</summary>
/// <param name="InWorld">For each world.</param>
/// <param name="Value">Total chance of the worlds where it is.</param>
/// <param name="Complement">Total chance of the others.</param>
public sealed record Presence(bool[] InWorld, double Value, double Complement)
{
    public static Presence Of(bool[] inWorld, IReadOnlyList<(int[] Outcomes, double Chance)> worlds)
    {
        double value = 0;
        double complement = 0;
        for (int i = 0; i < inWorld.Length; i++)
        {
            if (inWorld[i])
            {
                value += worlds[i].Chance;
            }
            else
            {
                complement += worlds[i].Chance;
            }
        }

        return new Presence(inWorld, value, complement);
    }
}
