namespace Uncertain.Tests.Worlds;

/// <summary>Asserts that a call is refused with exactly these words and that nothing was added.</summary>
internal static class Door
{
    public static InvalidInputException Refuses(WorldSpace worlds, string message, Action call) =>
        Refuses<InvalidInputException>(worlds, message, call);

    public static TException Refuses<TException>(WorldSpace worlds, string message, Action call)
        where TException : UncertainException
    {
        int before = worlds.VariableCount;

        TException exception = Assert.Throws<TException>(call);

        Assert.Equal(message, exception.Message);
        Assert.Equal(before, worlds.VariableCount);
        return exception;
    }
}
