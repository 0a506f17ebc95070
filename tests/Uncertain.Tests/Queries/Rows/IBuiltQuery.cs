namespace Uncertain.Tests.Queries.Rows;

/// <summary>A case as a query of the library, with the row type and the kind of root hidden.</summary>
public interface IBuiltQuery
{
    WorldSpace Worlds { get; }

    QueryPlan Plan { get; }

    /// <summary>Each answer (a <see cref="Row"/>, or true) with its lineage.</summary>
    IReadOnlyList<(object Answer, Lineage Lineage)> Derive();

    /// <summary>Each answer with its probability and lineage.</summary>
    IReadOnlyList<(object Answer, Probability Probability, Lineage Lineage)> Evaluate(EvaluationOptions options);
}
