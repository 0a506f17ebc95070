namespace Uncertain.Tests.Queries;

public interface ICaseGenerator
{
    TestCase Next(Random random);
}
