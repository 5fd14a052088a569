namespace Evenhand.Circuits.Learning;

/// <summary>The predictions of one bin.</summary>
/// <param name="From">Lower end of the probabilities stated.</param>
/// <param name="To">Upper end.</param>
/// <param name="Predictions">How many.</param>
/// <param name="Stated">Their mean.</param>
/// <param name="CameTrue">The share that came true.</param>
public sealed record CalibrationBin(double From, double To, long Predictions, double Stated, double CameTrue);
