namespace Evenhand.Circuits.Learning;

/// <summary>Chooses the number of profiles by the likelihood of held-out records.</summary>
public static class ProfileSelection
{
    private static readonly int[] Candidates = [1, 2, 4, 8, 16, 32, 64];

    /// <summary>Learns with more and more profiles while held-out records gain, and gives the best.</summary>
    /// <param name="sample">What is learned from.</param>
    /// <param name="heldOut">What the numbers are compared on.</param>
    /// <param name="options">How; its number of profiles is not used.</param>
    /// <param name="progress">Told the share done, now and then; null for nobody.</param>
    public static LearnedProfile Learn(TrainingTable sample, TrainingTable heldOut, LearningOptions options, Action<double>? progress = null)
    {
        int[] parents = ProfileLearner.Tree(sample);
        LearnedProfile? best = null;
        for (int i = 0; i < Candidates.Length; i++)
        {
            int done = i;
            LearnedProfile next = new ProfileLearner(sample, heldOut, options with { Profiles = Candidates[i] }, p => progress?.Invoke((done + p) / Candidates.Length))
                .Learn(parents);
            if (best is not null && next.HeldOut <= best.HeldOut)
            {
                break;
            }

            best = next;
        }

        progress?.Invoke(1);
        return best!;
    }
}
