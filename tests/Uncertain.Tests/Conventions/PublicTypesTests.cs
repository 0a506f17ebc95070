using System.Reflection;
using System.Xml.Linq;

namespace Uncertain.Tests.Conventions;

public sealed class PublicTypesTests
{
    private const BindingFlags Declared = BindingFlags.Public | BindingFlags.Instance | BindingFlags.Static | BindingFlags.DeclaredOnly;

    private static readonly Assembly s_library = typeof(WorldSpace).Assembly;

    public static TheoryData<Type> PublicTypes => [.. s_library.GetExportedTypes()];

    [Theory]
    [MemberData(nameof(PublicTypes))]
    public void PublicType_Always_CannotBeInherited(Type type) => Assert.True(
        type.IsSealed || type.IsInterface || Array.TrueForAll(
            type.GetConstructors(BindingFlags.Public | BindingFlags.NonPublic | BindingFlags.Instance),
            constructor => constructor.IsAssembly || constructor.IsFamilyAndAssembly || constructor.IsPrivate),
        $"{type} is open to inheritance, which nobody has designed it for.");

    [Theory]
    [MemberData(nameof(PublicTypes))]
    public void PublicType_Always_IsInOneOfTheTwoNamespaces(Type type)
    {
        Assert.Contains(type.Namespace, new[] { "Uncertain", "Uncertain.Inference" });
        Assert.DoesNotContain(type.Name, new[] { "Uncertain", "Inference" });
    }

    [Theory]
    [MemberData(nameof(PublicTypes))]
    public void PublicType_Always_HasNoMutableState(Type type)
    {
        Assert.DoesNotContain(
            type.GetFields(Declared),
            field => !field.IsLiteral && !field.IsInitOnly && !type.IsEnum);
        Assert.DoesNotContain(type.GetProperties(Declared), property => property.SetMethod is { IsPublic: true } setter
            && !setter.ReturnParameter.GetRequiredCustomModifiers().Contains(typeof(System.Runtime.CompilerServices.IsExternalInit)));
    }

    [Theory]
    [MemberData(nameof(PublicTypes))]
    public void PublicType_Always_IsDocumented(Type type)
    {
        var documentation = XDocument.Load(Path.ChangeExtension(s_library.Location, ".xml"));

        XElement? member = documentation.Descendants("member").SingleOrDefault(m => (string?)m.Attribute("name") == $"T:{type.FullName}");

        Assert.False(string.IsNullOrWhiteSpace(member?.Element("summary")?.Value), $"{type} has no summary.");
    }

    [Fact]
    public void PublicTypes_AsyncMethods_TakeATokenAtTheEndOrBeforeTheName()
    {
        IEnumerable<MethodInfo> methods = s_library.GetExportedTypes()
            .SelectMany(type => type.GetMethods(Declared))
            .Where(method => method.Name.EndsWith("Async", StringComparison.Ordinal));

        Assert.NotEmpty(methods);
        Assert.All(methods, method => Assert.Contains(method.GetParameters(), p => p.ParameterType == typeof(CancellationToken)));
    }

    [Fact]
    public void Library_Always_HasNoDependencyOutsideTheFramework() => Assert.All(
        s_library.GetReferencedAssemblies(),
        reference => Assert.True(reference.Name!.StartsWith("System.", StringComparison.Ordinal), $"{reference.Name} is no part of .NET."));
}
