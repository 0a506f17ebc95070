namespace Uncertain.Inference.Safe.Steps;

/// <summary>The fields that a scan reads: those of its variables, and others that have to agree with them or must not be null.</summary>
/// <param name="All">The fields.</param>
/// <param name="PlaceOf">For each variable of the scan, the place of its field.</param>
/// <param name="AreCompared">Whether rows are left out by comparing fields with each other or with null.</param>
internal sealed record ScanFields(ScanField[] All, int[] PlaceOf, bool AreCompared);
