using Uncertain.Inference.Safe.Analysis;
using Uncertain.Worlds;

namespace Uncertain.Inference.Safe.Steps;

/// <summary>A field that a scan reads.</summary>
/// <param name="Variable">The variable that it is, or has to agree with.</param>
/// <param name="Reader">Reads it.</param>
/// <param name="DropsNulls">Whether it may be null, and a row where it is joins with nothing.</param>
internal sealed record ScanField(Field Variable, FieldReader Reader, bool DropsNulls);
