using Evenhand.Circuits.Profiles;

namespace Evenhand.Circuits.Learning;

/// <summary>A learned circuit and how likely it finds held-out records.</summary>
/// <param name="Circuit">The circuit.</param>
/// <param name="HeldOut">Mean log-likelihood of the held-out records, nats a record.</param>
public sealed record LearnedProfile(ProfileCircuit Circuit, double HeldOut);
