namespace Evenhand.Monitoring.Charters;

/// <summary>What an alert asks of the person it reaches.</summary>
public enum AlertSeverity
{
    /// <summary>To be worked on in hours.</summary>
    Ticket = 0,

    /// <summary>To be worked on now.</summary>
    Page = 1,

    /// <summary>To be known.</summary>
    Info = 2,
}
