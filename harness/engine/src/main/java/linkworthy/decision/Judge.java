package linkworthy.decision;

import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.Optional;
import java.util.function.LongPredicate;
import linkworthy.statistics.Moments;
import linkworthy.statistics.SkewedMean;

/** Judges one need of all codecs. {@link Shortlist} says how. */
final class Judge {
  /** No larger sample is proposed. */
  private static final long MOST = 1_000_000;

  private final Measurements measured;
  private final Need need;
  private final double meetsError;
  private final double failsError;

  /**
   * @param error chance of a wrong statement on one codec
   */
  Judge(Measurements measured, Need need, double error) {
    this.measured = measured;
    this.need = need;
    this.meetsError = error;
    this.failsError = error / need.conditions().size();
  }

  Judgement judge(String codec) {
    List<Judgement> each = new ArrayList<>();
    for (Measurements.Condition condition : need.conditions()) {
      each.add(judge(condition, measured.find(condition, codec)));
    }
    Verdict verdict = Verdict.all(each.stream().map(Judgement::verdict).toList());
    return each.stream()
        .filter(judgement -> judgement.verdict() == verdict)
        .min(verdict == Verdict.FAILS ? FURTHEST_MISSED : this::nearestMissed)
        .orElseThrow()
        .withVerdict(verdict);
  }

  private static final Comparator<Judgement> FURTHEST_MISSED =
      Comparator.comparingDouble(Judgement::margin);

  private int nearestMissed(Judgement a, Judgement b) {
    return Double.compare(ahead(a), ahead(b));
  }

  /** How far the bound is on the right side; without bound, none is further behind. */
  private double ahead(Judgement judgement) {
    double ahead = signed(judgement.bound() - judgement.target());
    return Double.isNaN(ahead) ? Double.NEGATIVE_INFINITY : ahead;
  }

  private double signed(double difference) {
    return need.isShare() || need.atLeast() ? difference : -difference;
  }

  private Judgement judge(Measurements.Condition condition, Optional<Sample> found) {
    double target = need.isShare() ? need.share() : need.level();
    if (found.isEmpty() || found.get().pictures() == 0) {
      return new Judgement(
          Verdict.UNDECIDED, condition, Double.NaN, Double.NaN, target, Double.NaN, 0, 0);
    }
    Sample sample = found.get();
    double[] figures = sample.figures(need.measure());
    double estimate = need.isShare() ? share(sample) : Moments.of(figures).mean();
    double margin = signed(estimate - target);
    Bounds bounds = bounds(sample, figures);
    Verdict verdict = verdict(bounds, target);
    boolean high = estimate >= target;
    boolean open = verdict == Verdict.UNDECIDED && margin != 0 && Double.isFinite(margin);
    return new Judgement(
        verdict,
        condition,
        estimate,
        high ? bounds.lower() : bounds.upper(),
        target,
        margin,
        open ? picturesWanted(sample, figures, estimate, margin) : 0,
        open ? replicatesWanted(sample, figures, estimate, margin) : 0);
  }

  private Verdict verdict(Bounds bounds, double target) {
    boolean highIsGood = signed(1) > 0;
    double near = highIsGood ? bounds.lower() : bounds.upper();
    double far = highIsGood ? bounds.upper() : bounds.lower();
    if (signed(near - target) >= 0) {
      return Verdict.MEETS;
    }
    return signed(far - target) < 0 ? Verdict.FAILS : Verdict.UNDECIDED;
  }

  private double share(Sample sample) {
    return (double) reached(sample) / sample.pictures();
  }

  private int reached(Sample sample) {
    return (int) sample.means(need.measure()).values().stream().filter(need::reached).count();
  }

  private Bounds bounds(Sample sample, double[] figures) {
    if (need.isShare()) {
      return shareBounds(reached(sample), sample.pictures());
    }
    Bounds overPictures =
        Bounds.ofMean(
            figures,
            signed(1) > 0 ? meetsError : failsError,
            signed(1) > 0 ? failsError : meetsError);
    return isRate()
        ? overPictures.or(
            shareBounds(
                Math.toIntExact(sample.hits(need.measure())), Math.toIntExact(sample.trials())))
        : overPictures;
  }

  private Bounds shareBounds(int hits, int count) {
    boolean highIsGood = signed(1) > 0;
    return Bounds.ofShare(
        hits, count, highIsGood ? meetsError : failsError, highIsGood ? failsError : meetsError);
  }

  private boolean isRate() {
    return need.measure().equals(Measurements.OUTAGE_RATE);
  }

  private double error(double margin) {
    return margin > 0 ? meetsError : failsError;
  }

  private long picturesWanted(Sample sample, double[] figures, double estimate, double margin) {
    if (need.isShare()) {
      return casesWanted(sample.pictures(), estimate, need.share());
    }
    double variance = Moments.of(figures).variance();
    double skewness = SkewedMean.skewness(figures);
    long byMean =
        smallest(
            sample.pictures(),
            n -> standardErrors(margin, n, skewness) * Math.sqrt(variance / n) <= Math.abs(margin));
    if (!isRate()) {
      return byMean;
    }
    long cases = casesWanted(sample.trials(), estimate, need.level());
    return byMean == 0 || cases == 0
        ? 0
        : Math.max(byMean, rounded((double) cases / sample.replicates()));
  }

  /** Zero unless the pictures' own differences leave room. */
  private long replicatesWanted(Sample sample, double[] figures, double estimate, double margin) {
    if (need.isShare() || sample.pictures() < 2) {
      return 0;
    }
    double errors = standardErrors(margin, sample.pictures(), SkewedMean.skewness(figures));
    double allowed = margin * margin / (errors * errors) * sample.pictures();
    double variance = Moments.of(figures).variance();
    if (isRate()) {
      long cases = casesWanted(sample.trials(), estimate, need.level());
      return variance <= allowed ? rounded((double) cases / sample.pictures()) : 0;
    }
    double noise = sample.noiseVariance(need.measure());
    double own = Math.max(0, variance - noise / sample.replicates());
    double wanted = noise / (allowed - own);
    return allowed > own && wanted <= MOST ? rounded(wanted) : 0;
  }

  /** To the side on which the target lies. */
  private double standardErrors(double margin, long count, double skewness) {
    return count < 2
        ? Double.POSITIVE_INFINITY
        : SkewedMean.standardErrors(
            error(margin), count, signed(margin) > 0 ? skewness : -skewness);
  }

  /** How many cases with the same share of hits would show it to differ from the target. */
  private long casesWanted(long now, double estimate, double target) {
    return smallest(
        now,
        n -> {
          Bounds bounds = shareBounds((int) Math.rint(n * estimate), (int) n);
          return estimate > target ? bounds.lower() >= target : bounds.upper() < target;
        });
  }

  /** The smallest number from {@code now} on with a property that larger ones have too, or 0. */
  private static long smallest(long now, LongPredicate enough) {
    long low = now - 1;
    long high = now;
    while (high <= MOST && !enough.test(high)) {
      low = high;
      high *= 2;
    }
    if (high > MOST) {
      return 0;
    }
    while (high - low > 1) {
      long middle = (low + high) / 2;
      if (enough.test(middle)) {
        high = middle;
      } else {
        low = middle;
      }
    }
    return high;
  }

  private static long rounded(double count) {
    return (long) Math.ceil(count);
  }
}
