namespace Uncertain.Tests.Execution;

/// <summary>Tests that measure time or memory run alone.</summary>
[CollectionDefinition(nameof(QuietCollection), DisableParallelization = true)]
#pragma warning disable CA1711 // xunit's word for it is 'collection'.
public sealed class QuietCollection;
