package linkworthy.noise;

import java.util.BitSet;
import java.util.Collections;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.TreeMap;
import java.util.function.IntFunction;
import linkworthy.input.BadInput;
import linkworthy.input.Key;
import linkworthy.input.Kind;
import org.apache.commons.rng.UniformRandomProvider;
import org.jspecify.annotations.Nullable;

/**
 * Flipped bits in packets. With bit-error rate b and natural binary samples of B bits, P = 2^B - 1,
 * the equivalent noise variance is b (4^B - 1)/3 = b P (P+2)/3, in grey levels squared: a flip of
 * bit j changes a sample by 2^j. Changes of one sample by several flips are left out, so this holds
 * to first order in b.
 *
 * <p>Errors are independent where {@code mean-burst} is 1. Where it is larger, a chain of two
 * states runs over the bits of each packet (Gilbert 1960, "Capacity of a burst-noise channel"): no
 * errors in the good state, errors with probability {@code errors-bad} in the bad one, in which it
 * stays for {@code mean-burst} bits on average. The first state of each packet is drawn from the
 * long-run shares, so packets do not depend on each other. A rate above errors-bad L/(L+1), L being
 * the mean burst, or above 1/2 is refused with a {@link BadInput}.
 *
 * <p>A model file may name a {@link ErrorCurve} by {@code curve}; then the axis of that curve is
 * offered too. Under a fading curve each packet has a rate of its own, whatever axis sets the mean,
 * and errors within it are independent: another mean burst than 1 is refused.
 *
 * <p>Parameters: {@code mean-burst}, in bits (default 1, at least 1); {@code errors-bad} (default
 * 1/2, at least 1e-6); {@code frame-check}, on or off (default off); {@code check-bits}, its
 * length, 16 or 32 (default 16; without frame-check another length is refused). With a check the
 * link's header and the check are exposed as well; without it only the payload is, its header being
 * taken as sound.
 *
 * @param curve the curve in force, if any
 */
public record BitErrors(@Nullable ErrorCurve curve) implements NoiseProcess {
  /** Share of bits flipped, 0 to 1/2. */
  public static final String BIT_ERROR_RATE = "bit-error-rate";

  /** Mean stay in the bad state, in bits; 1 for independent errors. */
  public static final String MEAN_BURST = "mean-burst";

  /** Probability of an error in the bad state. */
  public static final String ERRORS_BAD = "errors-bad";

  /** Whether frames are checked and dropped when damaged. */
  public static final String FRAME_CHECK = "frame-check";

  /** Length of the frame check, in bits: 16 or 32. */
  public static final String CHECK_BITS = "check-bits";

  private static final String CURVE = "curve";
  private static final double MAX_RATE = 0.5;
  private static final double MIN_ERRORS_BAD = 1e-6;
  private static final double MAX_MEAN_BURST = 1e9;
  private static final int USUAL_CHECK = 16;
  private static final int LONG_CHECK = 32;

  private static final Map<String, Double> PARAMETERS =
      Collections.unmodifiableMap(
          new TreeMap<>(
              Map.of(
                  MEAN_BURST,
                  1.0,
                  ERRORS_BAD,
                  0.5,
                  FRAME_CHECK,
                  0.0,
                  CHECK_BITS,
                  (double) USUAL_CHECK)));

  /** The process without a curve, as the registry has it. */
  public BitErrors() {
    this(null);
  }

  @Override
  public String id() {
    return "bit-errors";
  }

  @Override
  public int revision() {
    return 1;
  }

  @Override
  public String summary() {
    return "bits of packets flipped, independently or in bursts, by rate or by a radio's error"
        + " curve; with frame-check a damaged packet is dropped; equivalent variance b (4^B - 1)/3"
        + " for bit-error rate b and B bits a sample";
  }

  @Override
  public List<Site> sites() {
    return List.of(Site.BITS);
  }

  @Override
  public Map<String, Double> parameters() {
    return PARAMETERS;
  }

  @Override
  public Set<String> flags() {
    return Set.of(FRAME_CHECK);
  }

  @Override
  public Set<String> laterParameters() {
    return Set.of(CHECK_BITS);
  }

  @Override
  public Set<String> settingKeys() {
    return Set.of(CURVE);
  }

  @Override
  public Map<String, String> settings() {
    return curve == null ? Map.of() : Map.of(CURVE, curve.id());
  }

  @Override
  public NoiseProcess with(Map<String, String> settings) {
    String id = settings.get(CURVE);
    return new BitErrors(id == null ? null : ErrorCurve.find(id));
  }

  @Override
  public List<Key> keys() {
    return List.of(
        SeverityChecks.parameter(
            MEAN_BURST, 1, MAX_MEAN_BURST, "mean stay in the bad state, in bits; 1 with fading"),
        SeverityChecks.parameter(
            ERRORS_BAD, MIN_ERRORS_BAD, 1, "chance of an error in the bad state"),
        Key.optional(
            FRAME_CHECK,
            new Kind.Flag(),
            "the model's",
            "whether frames are checked, and dropped when damaged"),
        Key.optional(
            CHECK_BITS,
            new Kind.Numbers(USUAL_CHECK, LONG_CHECK),
            "the model's",
            "bits of the frame check; 32 only where there is one"),
        SeverityChecks.axis(
            BIT_ERROR_RATE, 0, MAX_RATE, "share of bits; up to what the burst allows"),
        SeverityChecks.decibelAxis(
            ErrorCurve.Ratio.EB_N0.axis(), "energy of a bit over the noise density, in dB"),
        SeverityChecks.decibelAxis(
            ErrorCurve.Ratio.SINR.axis(), "signal over interference and noise, in dB"),
        Key.optional(
            CURVE,
            new Kind.Words(ErrorCurve.ids()),
            "no curve",
            "published bit-error rate of a radio"));
  }

  @Override
  public Set<String> axes() {
    return curve == null
        ? SeverityChecks.inOrder(Severity.SNR_DB, Severity.VARIANCE, BIT_ERROR_RATE)
        : SeverityChecks.inOrder(
            Severity.SNR_DB, Severity.VARIANCE, BIT_ERROR_RATE, curve.ratio().axis());
  }

  @Override
  public void check(Severity severity, Map<String, Double> parameters, Site site) {
    SeverityChecks.common(this, severity, parameters, site);
    int unused = checkBits(parameters);
    double limit = limit(parameters);
    if (severity.axis().equals(BIT_ERROR_RATE)) {
      SeverityChecks.inRange(severity.value(), 0, limit, BIT_ERROR_RATE);
    }
    if (curve != null && severity.axis().equals(curve.ratio().axis())) {
      double rate = curve.meanRate(SeverityChecks.decibels(severity));
      if (!(rate <= limit)) {
        throw tooMany(severity, rate, limit);
      }
    }
  }

  /** The length of the frame check, 0 if there is none, after checking both parameters. */
  private int checkBits(Map<String, Double> parameters) {
    boolean checked = SeverityChecks.flag(this, parameters, FRAME_CHECK);
    double bits = SeverityChecks.parameter(this, parameters, CHECK_BITS);
    if (bits != USUAL_CHECK && !(checked && bits == LONG_CHECK)) {
      throw new BadInput(
          "%s is %s; accepted %s: %s"
              .formatted(
                  CHECK_BITS,
                  bits,
                  checked ? "with frame-check" : "without frame-check",
                  checked ? "16.0 or 32.0" : "16.0"));
    }
    return checked ? (int) bits : 0;
  }

  /** The largest bit-error rate that the parameters allow, after checking them. */
  private double limit(Map<String, Double> parameters) {
    double burst = SeverityChecks.parameter(this, parameters, MEAN_BURST);
    double bad = SeverityChecks.parameter(this, parameters, ERRORS_BAD);
    SeverityChecks.inRange(burst, 1, MAX_MEAN_BURST, MEAN_BURST);
    SeverityChecks.inRange(bad, MIN_ERRORS_BAD, 1, ERRORS_BAD);
    if (burst != 1 && curve != null && curve.isFading()) {
      throw new BadInput(
          "%s is %s; accepted with the curve %s: 1.0".formatted(MEAN_BURST, burst, curve.id()));
    }
    return burst == 1 ? MAX_RATE : Math.min(MAX_RATE, bad * (burst / (burst + 1)));
  }

  private static BadInput tooMany(Severity severity, double rate, double limit) {
    return new BadInput(
        "bit-errors at %s %s needs a bit-error rate of %s; accepted: 0.0 to %s"
            .formatted(severity.axis(), severity.value(), rate, limit));
  }

  @Override
  public Impairment at(
      Severity severity, Map<String, Double> parameters, Site site, SignalStatistics signal) {
    check(severity, parameters, site);
    double perFlip = signal.peak() * (signal.peak() + 2.0) / 3;
    double rate;
    double variance;
    if (severity.axis().equals(BIT_ERROR_RATE)) {
      rate = severity.value();
      variance = rate * perFlip;
    } else if (curve != null && severity.axis().equals(curve.ratio().axis())) {
      rate = curve.meanRate(SeverityChecks.decibels(severity));
      variance = rate * perFlip;
    } else {
      variance = SeverityChecks.noiseVariance(severity, signal);
      rate = variance / perFlip;
      double limit = limit(parameters);
      if (!(rate <= limit)) {
        throw tooMany(severity, rate, limit);
      }
    }
    return new Flips(variance, checkBits(parameters), channel(rate, parameters));
  }

  private Channel channel(double rate, Map<String, Double> parameters) {
    double burst = SeverityChecks.parameter(this, parameters, MEAN_BURST);
    if (rate == 0) {
      return (random, bits) -> new BitSet();
    }
    if (curve != null && curve.isFading()) {
      ErrorCurve fading = curve;
      double mean = curve.meanRatio(rate);
      return (random, bits) -> {
        double gain = -StrictMath.log(1 - random.nextDouble());
        return independent(fading.steadyRate(mean * gain), random, bits);
      };
    }
    if (burst == 1) {
      return (random, bits) -> independent(rate, random, bits);
    }
    double bad = SeverityChecks.parameter(this, parameters, ERRORS_BAD);
    MarkovLoss chain = MarkovLoss.of(rate, burst, 1, 1 - bad);
    return (random, bits) -> bursty(chain, bad, random, bits);
  }

  /** Draws the flipped bits of one packet from a stream of its own. */
  private interface Channel {
    BitSet flipped(UniformRandomProvider random, int bits);
  }

  private static BitSet independent(double rate, UniformRandomProvider random, int bits) {
    BitSet flipped = new BitSet();
    flip(flipped, rate, random, 0, bits, bits);
    return flipped;
  }

  private static BitSet bursty(
      MarkovLoss chain, double errorsBad, UniformRandomProvider random, int bits) {
    BitSet flipped = new BitSet();
    boolean bad = random.nextDouble() < chain.badShare();
    double at = 0;
    while (at < bits) {
      double end = at + 1 + untilNext(bad ? chain.r() : chain.p(), random);
      if (bad) {
        flip(flipped, errorsBad, random, at, end, bits);
      }
      at = end;
      bad = !bad;
    }
    return flipped;
  }

  /** Flips each bit of a stretch, as far as it lies within the packet, at a rate. */
  private static void flip(
      BitSet flipped, double rate, UniformRandomProvider random, double from, double to, int bits) {
    double end = Math.min(to, bits);
    for (double at = from + untilNext(rate, random); at < end; at += 1 + untilNext(rate, random)) {
      flipped.set((int) at);
    }
  }

  /** How many bits pass before the next event of a probability: geometric, from 0. */
  private static double untilNext(double probability, UniformRandomProvider random) {
    double log = StrictMath.log(1 - random.nextDouble());
    return probability == 0
        ? Double.POSITIVE_INFINITY
        : Math.floor(log / StrictMath.log1p(-probability));
  }

  private record Flips(double equivalentNoiseVariance, int checkBits, Channel channel)
      implements Impairment.OnBits {
    @Override
    public Impairment.Errors errors(UniformRandomProvider random) {
      IntFunction<UniformRandomProvider> streams = NoiseStreams.numbered(random);
      return (index, bits) -> channel.flipped(streams.apply(index), bits);
    }
  }
}
