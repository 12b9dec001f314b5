package linkworthy.noise.fit;

import linkworthy.noise.MarkovLoss;

/**
 * One form of loss process fitted to a trace by maximum likelihood, given the trace's first fate.
 *
 * @param form what was assumed
 * @param chain the fitted chain; independent losses are the chain with p = q and r = 1-q
 * @param logLikelihood natural logarithm of the likelihood at the fit
 * @param errorOfP standard error of p; NaN where there is none
 * @param errorOfR standard error of r; NaN where there is none
 * @param errorOfH standard error of h; NaN where there is none, or h is fixed
 * @param errorOfLossRate standard error of the share lost of a trace of this length under the
 *     fitted chain, so bursts are counted for
 */
public record ChainEstimate(
    Form form,
    MarkovLoss chain,
    double logLikelihood,
    double errorOfP,
    double errorOfR,
    double errorOfH,
    double errorOfLossRate) {
  /** What is assumed of the losses, from the simplest on; each form contains those before it. */
  public enum Form {
    /** Each packet is lost with the same probability, whatever befell the others. */
    INDEPENDENT(1, "independent losses"),
    /** Two states, good and bad, and everything is lost in the bad one. */
    SIMPLE(2, "simple two-state chain"),
    /** Two states, and a share h is delivered in the bad one too. */
    THREE_PARAMETER(3, "three-parameter chain (Gilbert)");

    private final int parameters;
    private final String label;

    Form(int parameters, String label) {
      this.parameters = parameters;
      this.label = label;
    }

    /** The form in words. */
    public String label() {
      return label;
    }
  }

  /** Number of probabilities estimated: 1, 2 or 3. */
  public int parameters() {
    return form.parameters;
  }

  /** Mean stay in the bad state 1/r, in packets. */
  public double meanBurst() {
    return 1 / chain.r();
  }

  /** Standard error of the mean stay, by the delta method; NaN where r has none. */
  public double errorOfMeanBurst() {
    return errorOfR / (chain.r() * chain.r());
  }
}
