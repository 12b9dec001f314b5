package linkworthy.decision;

/**
 * What the evidence says of one codec and one need, in the condition in which the need is closest
 * to being missed, or missed furthest.
 *
 * @param verdict over all conditions of the need
 * @param condition the condition that the figures are of
 * @param estimate the mean measured, or the share of pictures that reach the level; NaN if the
 *     codec was not measured there
 * @param bound the one-sided bound that would have to reach the target: the lower one where the
 *     estimate lies above it, the upper one below; NaN if there is none
 * @param target the level of the mean, or the share of pictures wanted
 * @param margin by how much the estimate is on the right side of the target; negative on the wrong
 *     one
 * @param pictures about how many pictures in all would decide it if further ones are like these, or
 *     0 if it is decided or no number would
 * @param replicates about how many replicates of each picture would decide it on the same pictures,
 *     or 0 if it is decided or no number would
 */
public record Judgement(
    Verdict verdict,
    Measurements.Condition condition,
    double estimate,
    double bound,
    double target,
    double margin,
    long pictures,
    long replicates) {
  Judgement withVerdict(Verdict newVerdict) {
    return new Judgement(
        newVerdict, condition, estimate, bound, target, margin, pictures, replicates);
  }
}
