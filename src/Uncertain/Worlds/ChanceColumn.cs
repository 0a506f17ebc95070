namespace Uncertain.Worlds;

/// <summary>
/// A column of chances that only grows, in pages. A page is an array of its own, or lies inside an array that a large source brought
/// along, so that tens of millions of chances are not copied.
/// </summary>
/// <remarks>
/// One writer at a time, any number of readers of what was there when they learnt of it: a page with chances never moves, except the last
/// one, whose copy has the same chances.
/// </remarks>
internal sealed class ChanceColumn
{
    private const int LogPage = 12;
    private const int PageSize = 1 << LogPage;
    private const int LeastRoom = 16;

    private Page[] _pages = new Page[1];
    private int _count;

    public double this[int index]
    {
        get
        {
            Page page = _pages[index >> LogPage];
            return page.Chances[page.Offset + (index & (PageSize - 1))];
        }
    }

    public void CopyTo(int start, Span<double> chances)
    {
        while (chances.Length > 0)
        {
            Page page = _pages[start >> LogPage];
            int place = start & (PageSize - 1);
            int length = Math.Min(chances.Length, PageSize - place);
            page.Chances.AsSpan(page.Offset + place, length).CopyTo(chances);
            chances = chances[length..];
            start += length;
        }
    }

    public void Add(ReadOnlySpan<double> chances)
    {
        while (chances.Length > 0)
        {
            int place = _count & (PageSize - 1);
            int length = Math.Min(chances.Length, PageSize - place);
            chances[..length].CopyTo(LastPage(place, length).AsSpan(place));
            chances = chances[length..];
            _count += length;
        }
    }

    /// <summary>As <see cref="Add"/>; the column keeps the array for the pages that lie inside it.</summary>
    public void Adopt(double[] chances)
    {
        int before = Math.Min(chances.Length, -_count & (PageSize - 1));
        Add(chances.AsSpan(0, before));
        int inside = before;
        for (; inside + PageSize <= chances.Length; inside += PageSize)
        {
            PageAt(_count >> LogPage) = new Page(chances, inside);
            _count += PageSize;
        }

        Add(chances.AsSpan(inside));
    }

    /// <summary>A copy that shares all pages until <see cref="Set"/> changes them.</summary>
    public ChanceColumn Copy() => new() { _pages = Array.ConvertAll(_pages, page => page with { IsOwn = false }), _count = _count };

    /// <summary>Changes chances of a copy; what it was copied from keeps its own. A copy is changed before it is copied itself.</summary>
    public void Set(int start, ReadOnlySpan<double> chances)
    {
        while (chances.Length > 0)
        {
            ref Page page = ref _pages[start >> LogPage];
            int place = start & (PageSize - 1);
            int length = Math.Min(chances.Length, PageSize - place);
            if (!page.IsOwn)
            {
                int used = Math.Min(PageSize, _count - (start - place));
                page = new Page(page.Chances.AsSpan(page.Offset, used).ToArray(), 0, IsOwn: true);
            }

            chances[..length].CopyTo(page.Chances.AsSpan(place));
            chances = chances[length..];
            start += length;
        }
    }

    // The array of the page that the next chances go to, with room for them from a place on.
    private double[] LastPage(int place, int length)
    {
        ref Page page = ref PageAt(_count >> LogPage);
        if (page.Chances is null || page.Chances.Length < place + length)
        {
            var chances = new double[Math.Min(PageSize, Math.Max(Math.Max(LeastRoom, 2 * place), place + length))];
            page.Chances.AsSpan(0, place).CopyTo(chances);
            page = new Page(chances, 0);
        }

        return page.Chances;
    }

    private ref Page PageAt(int number)
    {
        if (number == _pages.Length)
        {
            Array.Resize(ref _pages, 2 * number);
        }

        return ref _pages[number];
    }

    // Its own is a page that a copy has made to change it.
    private readonly record struct Page(double[] Chances, int Offset, bool IsOwn = false);
}
