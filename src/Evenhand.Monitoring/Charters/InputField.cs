namespace Evenhand.Monitoring.Charters;

/// <summary>A field that the deciding model sees.</summary>
public sealed record InputField : CodedField;
