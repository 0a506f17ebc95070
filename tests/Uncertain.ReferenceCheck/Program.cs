using Uncertain.ReferenceCheck;

try
{
    return Checker.Run(CommandLine.Parse(args), Console.Out, Console.Error) ? 0 : 1;
}
catch (ArgumentException e)
{
    Console.Error.WriteLine(e.Message);
    Console.Error.WriteLine(CommandLine.Usage);
    return 2;
}
