namespace Evenhand.Monitoring.Charters;

/// <summary>How large a charter may be; what exceeds a limit is a problem that names it.</summary>
public static class CharterLimits
{
    /// <summary>Largest file, in bytes.</summary>
    public const int Bytes = 1 << 20;

    /// <summary>Most groups and inputs together.</summary>
    public const int Fields = 500;

    /// <summary>Most listed values or bands of a field.</summary>
    public const int ValuesPerField = 1_000;

    /// <summary>Most quantile bands of an input.</summary>
    public const int Quantiles = 100;

    /// <summary>Most joint codes of an intersection, the three special codes of each group counted.</summary>
    public const int JointCodes = 100_000;

    /// <summary>Most groups crossed in one intersection.</summary>
    public const int CrossedGroups = 4;

    /// <summary>Most intersections.</summary>
    public const int Intersections = 200;

    /// <summary>Most slices.</summary>
    public const int Slices = 16;

    /// <summary>Most alert rules.</summary>
    public const int Alerts = 200;

    /// <summary>Most windows.</summary>
    public const int Windows = 16;

    /// <summary>Most groups that are compared without a named reference.</summary>
    public const int ComparedWithoutReference = 12;
}
