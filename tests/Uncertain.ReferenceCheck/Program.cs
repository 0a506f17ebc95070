namespace Uncertain.ReferenceCheck;

/// <summary>Checks the library against files of reference values; see <see cref="CommandLine.Usage"/>.</summary>
internal static class Program
{
    /// <returns>0 if all is well, 1 if a case is wrong or a file cannot be read, 2 if the arguments make no sense.</returns>
    private static int Main(string[] arguments)
    {
        try
        {
            return Checker.Run(CommandLine.Parse(arguments), Console.Out, Console.Error) ? 0 : 1;
        }
        catch (ArgumentException e)
        {
            Console.Error.WriteLine(e.Message);
            Console.Error.WriteLine(CommandLine.Usage);
            return 2;
        }
    }
}
