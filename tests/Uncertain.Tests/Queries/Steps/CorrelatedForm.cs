namespace Uncertain.Tests.Queries.Steps;

/// <summary>What a correlated inner set looks like.</summary>
public enum CorrelatedForm
{
    /// <summary>x => inner.Where(y => condition)</summary>
    Where,

    /// <summary>x => inner.Where(y => condition).Distinct().Where(y => y.B != 0)</summary>
    Longer,

    /// <summary>x => inner.Except(inner.Where(y => condition))</summary>
    Without,
}
