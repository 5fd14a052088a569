namespace Evenhand.Circuits.Structure;

/// <summary>What values a variable takes.</summary>
public enum VariableKind
{
    /// <summary>One of finitely many names.</summary>
    Category = 0,

    /// <summary>A number, kept in bins where the variable has edges, and as it is where it has none.</summary>
    Number = 1,
}
