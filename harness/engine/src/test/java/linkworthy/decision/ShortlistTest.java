package linkworthy.decision;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatExceptionOfType;
import static org.assertj.core.api.Assertions.within;

import java.util.List;
import java.util.Random;
import linkworthy.input.BadInput;
import linkworthy.input.YamlNode;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class ShortlistTest {
  /** Simulated tables; {@code -Dlinkworthy.statistics=20000} for a thorough run. */
  private static final int TABLES = Integer.getInteger("linkworthy.statistics", 400);

  /** Ten pictures, two replicates; good is 32 dB at 2 bits, fair 30, poor 20 at 3 bits. */
  private static Measurements measured(Measurements measured) {
    for (int picture = 0; picture < 10; picture++) {
      double own = picture - 4.5;
      for (double snr : new double[] {Double.NaN, 20, 10}) {
        for (int replicate = 0; replicate < (Double.isNaN(snr) ? 1 : 2); replicate++) {
          double psnr = own * 0.2 + (replicate == 0 ? 0.1 : -0.1) - (snr == 10 ? 1 : 0);
          String name = "p" + picture;
          measured.add(Trials.of("good", snr, name, replicate, 33 + psnr, 2));
          measured.add(Trials.of("fair", snr, name, replicate, 31 + psnr, 1));
          measured.add(Trials.of("poor", snr, name, replicate, 21 + psnr, 3));
        }
      }
    }
    return measured;
  }

  private static Shortlist shortlist(String needs) {
    YamlNode root = YamlNode.parse("needs.yaml", needs);
    Measurements measured = measured(Measurements.forShortlist(Needs.measures(root)));
    return Shortlist.of(measured, Needs.read(root, measured));
  }

  private static List<String> verdicts(Shortlist shortlist) {
    return shortlist.candidates().stream().map(c -> c.codec() + " " + c.verdict()).toList();
  }

  @Test
  void codecsComeCheapestFirstWithTheirVerdicts() {
    Shortlist shortlist = shortlist("needs: [{measure: psnr-db, mean-at-least: 30}]");
    assertThat(verdicts(shortlist)).containsExactly("fair undecided", "good meets", "poor fails");
    assertThat(shortlist.cheapest().orElseThrow().codec()).isEqualTo("good");
    assertThat(shortlist.candidates())
        .filteredOn(candidate -> !candidate.dominated())
        .extracting(Shortlist.Candidate::codec)
        .containsExactly("fair", "good");
    assertThat(shortlist.errorOfOne()).isCloseTo(0.05 / 3, within(1e-15));
    assertThat(shortlist.conditions()).hasSize(2);
    assertThat(shortlist.candidates().get(0).psnrDb()).isCloseTo(30.5, within(1e-12));
  }

  /** The severity that hurts most is the one shown; on the level nothing would decide. */
  @Test
  void theTightestConditionIsShown() {
    Judgement fair =
        shortlist("needs: [{measure: psnr-db, mean-at-least: 30}]")
            .candidates()
            .get(0)
            .judgements()
            .get(0);
    assertThat(fair.condition().text()).isEqualTo("gaussian on samples, snr-db 10");
    assertThat(fair.estimate()).isCloseTo(30, within(1e-12));
    assertThat(fair.margin()).isCloseTo(0, within(1e-12));
  }

  /**
   * The figures of ten pictures have the standard deviation 0.2 sqrt(110/12), the mean lies 0.15 dB
   * above the level and t(1 - 0.05/3, 9) is about 2.5: (2.4 * 0.606 / 0.15)^2 is about 90. The
   * noise is cancelled within each picture, so replicates would not help.
   */
  @Test
  void whatWouldDecideIsEstimated() {
    Judgement fair =
        shortlist("needs: [{measure: psnr-db, mean-at-least: 29.85, where: {snr-db: 10}}]")
            .candidates()
            .get(0)
            .judgements()
            .get(0);
    assertThat(fair.verdict()).isEqualTo(Verdict.UNDECIDED);
    assertThat(fair.pictures()).isBetween(70L, 90L);
    assertThat(fair.replicates()).isZero();
  }

  /** Ten of ten pictures show a share of 0.05/3 to the power 0.1, 66 %, and no more. */
  @ParameterizedTest
  @CsvSource({"0.66, meets, 0", "0.67, undecided, 11", "0.95, undecided, 80"})
  void sharesOfPictures(double share, String verdict, long pictures) {
    Judgement good =
        shortlist("needs: [{measure: psnr-db, at-least: 28, for: " + share + "}]")
            .candidates()
            .get(1)
            .judgements()
            .get(0);
    assertThat(good.verdict()).hasToString(verdict);
    assertThat(good.estimate()).isEqualTo(1);
    assertThat(good.pictures()).isEqualTo(pictures);
  }

  /** No outage in 20 trials leaves a rate of 1 - (0.05/3)^(1/20) = 18.5 %. */
  @ParameterizedTest
  @CsvSource({"0.19, meets", "0.18, undecided"})
  void noOutageIsNoCertainty(double rate, String verdict) {
    assertThat(
            shortlist("needs: [{measure: outage-rate, at-most: " + rate + "}]")
                .candidates()
                .get(0)
                .verdict())
        .hasToString(verdict);
  }

  @Test
  void priceAndFurtherColumnsAreMeasuresToo() {
    Shortlist shortlist =
        shortlist(
            """
            confidence: 0.9
            needs:
              - {measure: bits-per-pixel, at-most: 2}
              - {measure: energy-mj, at-most: 4}
              - {measure: psnr-db, at-least: 25, for: 0.6, where: {impairment: none}}
            """);
    assertThat(verdicts(shortlist)).containsExactly("fair meets", "good meets", "poor fails");
    assertThat(shortlist.needs().needs().get(2).text())
        .isEqualTo("psnr-db at least 25 for 60 % of pictures, where impairment none");
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "'> 10'|1",
        "'>= 10'|2",
        "'10 to 15'|1",
        "'[10, 20]'|2",
        "'< 20'|1",
        "'<= 20'|2",
        "'= 20'|1"
      })
  void severitiesArePicked(String comparison, int conditions) {
    String value = comparison.startsWith("[") ? comparison : "\"" + comparison + "\"";
    assertThat(
            shortlist("needs: [{measure: psnr-db, at-least: 1, where: {snr-db: " + value + "}}]")
                .conditions())
        .hasSize(conditions);
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "{measure: psnr, at-least: 1}|'psnr', of which the run has no figures; did you mean 'psnr-db'?",
        "{measure: ssim, at-least: 1}|accepted: psnr-db, mse",
        "{measure: psnr-db}|has no level; accepted: one of at-least, at-most, mean-at-least",
        "{measure: psnr-db, at-least: 1, at-most: 2}|has several: at-least, at-most; accepted: one of",
        "{measure: psnr-db, at-least: x}|'x'; accepted: a number",
        "{measure: psnr-db, at-least: 1, for: 1}|'1'; accepted: a share above 0 and below 1",
        "{measure: psnr-db, mean-at-least: 1, for: 0.9}|stands beside mean-at-least",
        "{measure: outage-rate, at-most: 1, for: 0.9}|stands with outage-rate",
        "{measure: psnr-db, at-lest: 1}|unknown key 'at-lest'",
        "{measure: psnr-db, at-least: 1, where: {impairment: gausian}}|did you mean 'gaussian'?",
        "{measure: psnr-db, at-least: 1, where: {snr-db: 11}}|picks no condition of the run; there are: 20, 10",
        "{measure: psnr-db, at-least: 1, where: {snr-db: 'about 3'}}|a comparison as in",
        "{measure: psnr-db, at-least: 1, where: {density: 3}}|unknown key 'density'"
      })
  void badNeedsAreRefusedWithTheirLine(String need, String complaint) {
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> shortlist("confidence: 0.95\nneeds:\n  - " + need))
        .withMessageStartingWith("needs.yaml, line 3: ")
        .withMessageContaining(complaint);
  }

  @Test
  void confidenceIsAboveOneHalf() {
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> shortlist("confidence: 95\nneeds: [{measure: mse, at-most: 1}]"))
        .withMessageContaining("line 1")
        .withMessageContaining("accepted: a number above 0.5 and below 1");
  }

  /**
   * Four codecs whose mean is on the level, and of whose pictures just the wanted share reach it.
   * If the truth lies a hair below, every 'meets' is wrong, and if a hair above, every 'fails'.
   * Tables with such a word are at most 5 %; the limit adds 4.5 standard deviations, which a right
   * program passes in fewer than 1 of 100 000 runs.
   */
  @Test
  void wholeTablesAreWrongAtMostAsOftenAsStated() {
    Random random = new Random(20_261_203);
    int meets = 0;
    int fails = 0;
    for (int table = 0; table < TABLES; table++) {
      Shortlist shortlist = onTheLevel(random);
      meets += says(shortlist, Verdict.MEETS) ? 1 : 0;
      fails += says(shortlist, Verdict.FAILS) ? 1 : 0;
    }
    int most = (int) (TABLES * 0.05 + 4.5 * Math.sqrt(TABLES * 0.05 * 0.95));
    assertThat(meets).isLessThanOrEqualTo(most);
    assertThat(fails).isLessThanOrEqualTo(most);
  }

  private static Shortlist onTheLevel(Random random) {
    Measurements measured = new Measurements();
    for (int picture = 0; picture < 15; picture++) {
      double own = 3 * random.nextGaussian();
      for (int codec = 0; codec < 4; codec++) {
        double psnr = 30 + own + random.nextGaussian();
        measured.add(Trials.of("c" + codec, 20, "p" + picture, 0, psnr, 1));
      }
    }
    String needs =
        """
        needs:
          - {measure: psnr-db, mean-at-least: 30}
          - {measure: psnr-db, at-least: 30, for: 0.5}
        """;
    return Shortlist.of(measured, Needs.read(YamlNode.parse("needs", needs), measured));
  }

  private static boolean says(Shortlist shortlist, Verdict verdict) {
    return shortlist.candidates().stream()
        .flatMap(c -> c.judgements().stream())
        .anyMatch(j -> j.verdict() == verdict);
  }
}
