using System.Linq.Expressions;
using System.Reflection;

namespace Uncertain;

/// <content>Membership.</content>
public partial class UncertainSet<T>
{
    private static readonly MethodInfo s_equals =
        typeof(EqualityComparer<T>).GetMethod(nameof(EqualityComparer<>.Equals), [typeof(T), typeof(T)])!;

    /// <summary>Is a value among the elements? Compared by default equality.</summary>
    /// <param name="value">The value.</param>
    public YesNoQuestion Contains(T value)
    {
        // Built by hand so that the plan prints the value and not a closure.
        ParameterExpression element = Expression.Parameter(typeof(T), "element");
        MethodCallExpression equals = Expression.Call(
            Expression.Constant(EqualityComparer<T>.Default), s_equals, element, Expression.Constant(value, typeof(T)));
        return Any(Expression.Lambda<Func<T, bool>>(equals, element));
    }
}
