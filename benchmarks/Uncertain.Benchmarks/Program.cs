using BenchmarkDotNet.Running;
using Uncertain.Benchmarks;
using Uncertain.Benchmarks.Ratios;

switch (args)
{
    case ["ratios", .. var names]:
        return RatioTable.Run(names) ? 0 : 1;
    case [ChildProcess.Argument, var task]:
        ChildProcess.Serve(task);
        return 0;
    default:
        BenchmarkSwitcher.FromAssembly(typeof(RatioTable).Assembly).Run(args);
        return 0;
}
