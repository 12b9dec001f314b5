package linkworthy.bench;

import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import linkworthy.bench.SyntheticRows.Shape;
import linkworthy.decision.Measurements;
import linkworthy.decision.Needs;
import linkworthy.decision.Shortlist;
import linkworthy.decision.Verdict;
import linkworthy.input.YamlNode;

/**
 * How often a table of the shortlist has a wrong word when every truth lies exactly on its limit: a
 * hair below, each <i>meets</i> would be wrong, and a hair above, each <i>fails</i>.
 */
final class ShortlistSimulation {
  private static final String TABLE = "Shortlist: any wrong word in a table, truth on the limit";
  private static final double STATED = 0.05;
  private static final double LEVEL = 30;

  private final int repetitions;
  private final SyntheticRows rows;

  ShortlistSimulation(int repetitions, long seed) {
    this.repetitions = repetitions;
    this.rows = new SyntheticRows(seed);
  }

  /**
   * What is drawn and asked.
   *
   * @param reaching share of pictures that reach the level, or NaN where their mean is asked for
   * @param outageRate share of trials
   */
  private record Case(
      String words,
      String needs,
      int codecs,
      int pictures,
      int replicates,
      Shape shape,
      double reaching,
      double outageRate) {
    /** Strong skewness needs 12 pictures, and the bounds far out in the tails more. */
    boolean isPromised() {
      return shape != Shape.VERY_SKEWED || (codecs == 1 && pictures >= 12);
    }
  }

  private static Case means(int codecs, int pictures, Shape shape) {
    return new Case(
        String.format(Locale.ROOT, "mean, codecs %d, pictures %d, %s", codecs, pictures, shape),
        "[{measure: psnr-db, mean-at-least: 30}]",
        codecs,
        pictures,
        1,
        shape,
        Double.NaN,
        0);
  }

  private static Case shares(int codecs, int pictures, double share) {
    return new Case(
        String.format(
            Locale.ROOT,
            "%.0f %% of pictures, codecs %d, pictures %d",
            100 * share,
            codecs,
            pictures),
        "[{measure: psnr-db, at-least: 30, for: " + share + "}]",
        codecs,
        pictures,
        1,
        Shape.GAUSSIAN,
        share,
        0);
  }

  private static Case outages(int codecs, int pictures, int replicates, double rate) {
    return new Case(
        String.format(
            Locale.ROOT,
            "outage rate %.0f %%, codecs %d, pictures %d, replicates %d",
            100 * rate,
            codecs,
            pictures,
            replicates),
        "[{measure: outage-rate, at-most: " + rate + "}]",
        codecs,
        pictures,
        replicates,
        Shape.GAUSSIAN,
        Double.NaN,
        rate);
  }

  List<Claim> claims() {
    List<Claim> claims = new ArrayList<>();
    for (Case asked :
        List.of(
            means(1, 12, Shape.GAUSSIAN),
            means(6, 12, Shape.GAUSSIAN),
            means(1, 12, Shape.SKEWED),
            means(6, 12, Shape.SKEWED),
            means(1, 5, Shape.VERY_SKEWED),
            means(1, 12, Shape.VERY_SKEWED),
            means(6, 12, Shape.VERY_SKEWED),
            means(1, 30, Shape.VERY_SKEWED),
            means(6, 30, Shape.VERY_SKEWED),
            shares(1, 30, 0.8),
            shares(6, 60, 0.8),
            outages(1, 12, 20, 0.05),
            outages(6, 12, 20, 0.1),
            new Case(
                "all three at once, codecs 4, pictures 30, replicates 5",
                "[{measure: psnr-db, mean-at-least: 30}, {measure: psnr-db, at-least: 30, for: 0.5},"
                    + " {measure: outage-rate, at-most: 0.1}]",
                4,
                30,
                5,
                Shape.GAUSSIAN,
                Double.NaN,
                0.1))) {
      claim(asked, claims);
    }
    return claims;
  }

  private void claim(Case asked, List<Claim> claims) {
    int meets = 0;
    int fails = 0;
    for (int i = 0; i < repetitions; i++) {
      Shortlist shortlist = draw(asked);
      meets += says(shortlist, Verdict.MEETS);
      fails += says(shortlist, Verdict.FAILS);
    }
    double stated = asked.isPromised() ? STATED : 1;
    String note = asked.isPromised() ? "" : "not promised";
    claims.add(new Claim(TABLE, asked.words, "wrong 'meets'", meets, repetitions, 0, stated, note));
    claims.add(new Claim(TABLE, asked.words, "wrong 'fails'", fails, repetitions, 0, stated, note));
  }

  private Shortlist draw(Case asked) {
    Measurements measured = new Measurements();
    for (int p = 0; p < asked.pictures; p++) {
      for (int codec = 0; codec < asked.codecs; codec++) {
        double own =
            Double.isNaN(asked.reaching)
                ? 2 * rows.draw(asked.shape)
                : rows.happens(asked.reaching) ? 1 : -1;
        for (int r = 0; r < asked.replicates; r++) {
          measured.add(
              SyntheticRows.row(
                  "codec " + codec, p, r, LEVEL + own, rows.happens(asked.outageRate)));
        }
      }
    }
    return Shortlist.of(
        measured, Needs.read(YamlNode.parse("needs", "needs: " + asked.needs), measured));
  }

  private static int says(Shortlist shortlist, Verdict verdict) {
    return shortlist.candidates().stream()
            .flatMap(candidate -> candidate.judgements().stream())
            .anyMatch(judgement -> judgement.verdict() == verdict)
        ? 1
        : 0;
  }
}
