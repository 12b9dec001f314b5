package linkworthy.noise.fit;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Arrays;
import java.util.List;
import java.util.Optional;
import linkworthy.input.BadInput;
import linkworthy.noise.Impairment;
import linkworthy.noise.MarkovLoss;
import linkworthy.noise.NoiseModel;
import linkworthy.noise.NoiseStreams;
import linkworthy.noise.Severity;
import linkworthy.noise.Site;
import org.apache.commons.rng.UniformRandomProvider;
import org.apache.commons.statistics.distribution.BinomialDistribution;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

class LossFitTest {
  private static final LossTrace SHORT = LossTrace.of("00011000010011100000");
  private static final MarkovLoss GILBERT = new MarkovLoss(0.03, 0.2, 1, 0.5);

  @TempDir private Path folder;

  private static UniformRandomProvider stream(long seed) {
    return NoiseStreams.open(
        seed, "test", "none", Site.PACKETS, new Severity(Severity.VARIANCE, 0), 0, "fit");
  }

  private static LossTrace simulated(MarkovLoss chain, int packets, long seed) {
    Impairment.Losses losses = chain.losses(stream(seed));
    StringBuilder digits = new StringBuilder();
    for (int i = 0; i < packets; i++) {
      digits.append(losses.lost(i) ? '1' : '0');
    }
    return LossTrace.of(digits.toString());
  }

  /**
   * Transition counts 10, 3, 3, 3; estimates and binomial errors: an example of our own, recomputed
   * independently in Python.
   */
  @Test
  void theSimpleChainIsFittedByTransitionCounts() {
    ChainEstimate simple = LossFit.of(SHORT).simple();
    assertThat(SHORT.transitions(0, 0)).isEqualTo(10);
    assertThat(SHORT.transitions(0, 1)).isEqualTo(3);
    assertThat(SHORT.transitions(1, 0)).isEqualTo(3);
    assertThat(SHORT.transitions(1, 1)).isEqualTo(3);
    assertThat(simple.chain().p()).isCloseTo(0.2307692308, within(1e-10));
    assertThat(simple.chain().r()).isEqualTo(0.5);
    assertThat(simple.chain().lossRate()).isCloseTo(0.3157894737, within(1e-10));
    assertThat(SHORT.lossRatio()).isEqualTo(0.3);
    assertThat(simple.errorOfP()).isCloseTo(0.1168545424, within(1e-10));
    assertThat(simple.errorOfR()).isCloseTo(0.2041241452, within(1e-10));
    assertThat(simple.meanBurst()).isEqualTo(2);
    assertThat(simple.errorOfMeanBurst()).isCloseTo(4 * 0.2041241452, within(1e-9));
  }

  /** n01 ln p + n00 ln(1-p) + n10 ln r + n11 ln(1-r), from the counts by hand. */
  @Test
  void theLikelihoodOfTheSimpleChainIsThatOfItsTransitions() {
    double expected =
        3 * StrictMath.log(3 / 13.0) + 10 * StrictMath.log(10 / 13.0) + 6 * StrictMath.log(0.5);
    assertThat(LossFit.of(SHORT).simple().logLikelihood()).isCloseTo(expected, within(1e-12));
  }

  /** By the textbook forward recursion over every packet, written down again here. */
  @ParameterizedTest
  @CsvSource({"0.03, 0.2, 0.5", "0.3, 0.4, 0.1", "0.001, 0.01, 0.9", "0.9, 0.8, 0"})
  void theLikelihoodIsThatOfTheForwardAlgorithm(double p, double r, double h) {
    MarkovLoss chain = new MarkovLoss(p, r, 1, h);
    for (long seed = 1; seed <= 5; seed++) {
      LossTrace trace = simulated(GILBERT, 400, seed);
      double good = 1 - chain.badShare();
      double bad = chain.badShare();
      double sum = -StrictMath.log(trace.lost(0) ? chain.lossRate() : 1 - chain.lossRate());
      for (int i = 0; i < trace.packets(); i++) {
        double g = trace.lost(i) ? 0 : good;
        double b = bad * (trace.lost(i) ? 1 - h : h);
        sum += StrictMath.log(g + b);
        good = (g * (1 - p) + b * r) / (g + b);
        bad = (g * p + b * (1 - r)) / (g + b);
      }
      double found = Gaps.of(trace).logLikelihood(chain);
      if (Double.isNaN(sum) || sum == Double.NEGATIVE_INFINITY) {
        assertThat(found).isEqualTo(Double.NEGATIVE_INFINITY);
      } else {
        assertThat(found).isCloseTo(sum, within(1e-9 * Math.abs(sum)));
      }
    }
  }

  /**
   * Inversion from Gilbert 1960 via Hasslinger and Hohlfeld; recomputed independently in Python.
   */
  @Test
  void momentsAreInverted() {
    Optional<MarkovLoss> chain = GilbertFit.ofMoments(0.0652173913, 0.4, 0.4953560372);
    assertThat(chain).isPresent();
    assertThat(chain.get().p()).isCloseTo(0.03, within(1e-8));
    assertThat(chain.get().r()).isCloseTo(0.2, within(1e-8));
    assertThat(chain.get().h()).isCloseTo(0.5, within(1e-8));
    assertThat(GilbertFit.ofMoments(0.5, 0.5, 0.5)).isEmpty();
    assertThat(GilbertFit.ofMoments(0.1, 0.4, Double.NaN)).isEmpty();
  }

  /** Trace and definition from "Burst Ratio of Packet Losses in Individual Network Flows". */
  @Test
  void burstRatioIsThatOfThePublishedExample() {
    String received = "1101111100011111";
    LossTrace trace = LossTrace.of(received.replace('1', 'x').replace('0', '1').replace('x', '0'));
    assertThat(trace.lossRatio()).isEqualTo(0.25);
    assertThat(trace.runs(true, false)).containsExactly(1, 3);
    assertThat(trace.burstRatio()).isEqualTo(1.5);
  }

  /** Rule of RFC 3611, section 4.7.2; an example of our own, recomputed independently in Python. */
  @Test
  void burstsAndGapsAreThoseOfTheRfc() {
    StringBuilder digits = new StringBuilder("0".repeat(100));
    for (int lost : new int[] {10, 13, 14, 20, 50, 80, 95}) {
      digits.setCharAt(lost, '1');
    }
    BurstGap gaps = BurstGap.of(LossTrace.of(digits.toString()));
    assertThat(gaps).isEqualTo(new BurstGap(2, 27, 6, 73, 1));
    assertThat(gaps.burstDensity()).isCloseTo(0.2222222222, within(1e-10));
    assertThat(gaps.gapDensity()).isCloseTo(0.01369863014, within(1e-11));
    String at16 = "1" + "0".repeat(16) + "1";
    assertThat(BurstGap.of(LossTrace.of(at16))).isEqualTo(new BurstGap(0, 0, 0, 18, 2));
    assertThat(BurstGap.of(LossTrace.of("1" + "0".repeat(15) + "1")))
        .isEqualTo(new BurstGap(1, 17, 2, 0, 0));
  }

  @Test
  void runsAreCountedWithAndWithoutTheCutOnes() {
    LossTrace trace = LossTrace.of("110100011");
    assertThat(trace.runs(true, false)).containsExactly(2, 1, 2);
    assertThat(trace.runs(true, true)).containsExactly(1);
    assertThat(trace.runs(false, true)).containsExactly(1, 3);
  }

  /**
   * Each of 20 traces of 20000 packets: p, r and the loss rate within 4.5 of the errors that the
   * fit itself states. False-alarm rate of one normal figure 6.8e-6, of all 60 together 4e-4.
   */
  @Test
  void theSimpleChainIsRecovered() {
    MarkovLoss truth = MarkovLoss.simple(0.05, 4);
    for (long seed = 1; seed <= 20; seed++) {
      ChainEstimate simple = LossFit.of(simulated(truth, 20_000, seed)).simple();
      assertNear(simple.chain().p(), truth.p(), simple.errorOfP(), seed);
      assertNear(simple.chain().r(), truth.r(), simple.errorOfR(), seed);
      assertNear(simple.chain().lossRate(), 0.05, simple.errorOfLossRate(), seed);
    }
  }

  /** As above for the three-parameter chain, p .03, r .2, h .5, with 30000 packets each. */
  @Test
  void theThreeParameterChainIsRecovered() {
    double[] squares = new double[3];
    int seeds = 20;
    for (long seed = 1; seed <= seeds; seed++) {
      ChainEstimate fit =
          LossFit.of(simulated(GILBERT, 30_000, seed)).threeParameter().orElseThrow();
      assertNear(fit.chain().p(), 0.03, fit.errorOfP(), seed);
      assertNear(fit.chain().r(), 0.2, fit.errorOfR(), seed);
      assertNear(fit.chain().h(), 0.5, fit.errorOfH(), seed);
      assertNear(fit.chain().lossRate(), GILBERT.lossRate(), fit.errorOfLossRate(), seed);
      squares[0] += StrictMath.pow((fit.chain().p() - 0.03) / fit.errorOfP(), 2);
      squares[1] += StrictMath.pow((fit.chain().r() - 0.2) / fit.errorOfR(), 2);
      squares[2] += StrictMath.pow((fit.chain().h() - 0.5) / fit.errorOfH(), 2);
    }
    // The errors stated are the scatter seen: chi-square with 20 degrees of freedom lies between
    // 5.0 and 48.5 but for 3e-4 and 4e-4 of the cases (recomputed independently with SciPy).
    for (double sum : squares) {
      assertThat(sum).isBetween(5.0, 48.5);
    }
  }

  /**
   * Intervals of 1.96 stated errors hold the truth in 93 to 97 % of the traces; {@code
   * -Dlinkworthy.statistics=N} takes N traces instead of 150. Limits are binomial, with a tail of
   * 1e-5 under any such share: a false alarm of 12 limits in fewer than 1 of 8 000 new sets of
   * seeds.
   */
  @Test
  void theStatedErrorsCover() {
    int traces = Integer.getInteger("linkworthy.statistics", 150);
    MarkovLoss truth = MarkovLoss.simple(0.05, 4);
    int[] simple = new int[3];
    int[] three = new int[3];
    for (long seed = 1; seed <= traces; seed++) {
      ChainEstimate fit = LossFit.of(simulated(truth, 10_000, 3000 + seed)).simple();
      simple[0] += holds(fit.chain().p(), truth.p(), fit.errorOfP());
      simple[1] += holds(fit.chain().r(), truth.r(), fit.errorOfR());
      simple[2] += holds(fit.chain().lossRate(), 0.05, fit.errorOfLossRate());
      fit = LossFit.of(simulated(GILBERT, 30_000, 3000 + seed)).threeParameter().orElseThrow();
      three[0] += holds(fit.chain().p(), GILBERT.p(), fit.errorOfP());
      three[1] += holds(fit.chain().r(), GILBERT.r(), fit.errorOfR());
      three[2] += holds(fit.chain().h(), GILBERT.h(), fit.errorOfH());
    }
    int least = BinomialDistribution.of(traces, 0.93).inverseCumulativeProbability(1e-5);
    int most = BinomialDistribution.of(traces, 0.97).inverseSurvivalProbability(1e-5);
    for (int[] held : List.of(simple, three)) {
      for (int hits : held) {
        assertThat(hits)
            .as("of %d: %s, %s", traces, Arrays.toString(simple), Arrays.toString(three))
            .isBetween(least, most);
      }
    }
  }

  private static int holds(double found, double truth, double error) {
    return Math.abs(found - truth) <= 1.96 * error ? 1 : 0;
  }

  private static void assertNear(double found, double truth, double error, long seed) {
    assertThat((found - truth) / error).as("seed %d", seed).isBetween(-4.5, 4.5);
  }

  /**
   * Of 100 traces each, at least 93 must be told right. With a true form rejected in 1 % of the
   * traces (the level), fewer than 93 happen with probability 8e-6 (binomial; recomputed
   * independently with SciPy).
   */
  @ParameterizedTest
  @CsvSource({
    "0.05, 0.95, 0, 10000, INDEPENDENT",
    "0.0125, 0.25, 0, 10000, SIMPLE",
    "0.03, 0.2, 0.5, 20000, THREE_PARAMETER"
  })
  void theRightFormIsChosen(
      double p, double r, double h, int packets, ChainEstimate.Form expected) {
    MarkovLoss truth = new MarkovLoss(p, r, 1, h);
    int right = 0;
    for (long seed = 1; seed <= 100; seed++) {
      LossFit fit = LossFit.of(simulated(truth, packets, 1000 + seed));
      right += fit.chosen().form() == expected ? 1 : 0;
    }
    assertThat(right).isBetween(93, 100);
  }

  /**
   * The p values of the run lengths are at least as large as uniform ones where the form is right:
   * of 100, at most 7 below 0.01 (binomial tail 8e-6) and about all where it is wrong.
   */
  @Test
  void runLengthsSpeakAgainstWrongFormsOnly() {
    int rightRejected = 0;
    int wrongRejected = 0;
    for (long seed = 1; seed <= 100; seed++) {
      LossTrace simple = simulated(MarkovLoss.simple(0.05, 4), 20_000, 2000 + seed);
      LossFit fit = LossFit.of(simple);
      rightRejected += RunLengths.of(simple, fit.simple()).pValue() < 0.01 ? 1 : 0;
      wrongRejected += RunLengths.of(simple, fit.independent()).pValue() < 0.01 ? 1 : 0;
    }
    assertThat(rightRejected).isLessThanOrEqualTo(7);
    assertThat(wrongRejected).isEqualTo(100);
  }

  @ParameterizedTest
  @ValueSource(strings = {"simple", "gilbert", "independent"})
  void theModelFileReadsBack(String kind) throws IOException {
    MarkovLoss truth =
        switch (kind) {
          case "simple" -> MarkovLoss.simple(0.05, 4);
          case "gilbert" -> GILBERT;
          default -> new MarkovLoss(0.05, 0.95, 1, 0);
        };
    LossFit fit = LossFit.of(simulated(truth, 20_000, 3));
    Path file = folder.resolve("My link 2.yaml");
    ModelFile.write(file, ModelFile.of(fit, ModelFile.id(file)));
    NoiseModel model = NoiseModel.read(file);
    ChainEstimate chosen = fit.chosen();
    assertThat(model.id()).isEqualTo("my-link-2");
    assertThat(model.parameters())
        .containsEntry("mean-burst", chosen.meanBurst())
        .containsEntry("delivery-good", 1.0)
        .containsEntry("delivery-bad", chosen.chain().h());
    assertThat(model.axes()).containsExactly("loss-rate");
    assertThat(model.source())
        .startsWith("fitted from text, 20000 packets, sha256 ")
        .endsWith(fit.trace().sha256());
    assertThat(model.notes()).contains("(s.e. ", chosen.form().label());
    MarkovLoss again =
        MarkovLoss.of(chosen.chain().lossRate(), chosen.meanBurst(), 1, chosen.chain().h());
    assertThat(again.p()).isCloseTo(chosen.chain().p(), within(1e-12));
    assertThatThrownBy(() -> ModelFile.write(file, ModelFile.of(fit, "x")))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("exists already");
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "000000000000000000000000000000|none of 30 packets was lost: the loss rate is below 0.09503",
        "111111111111111111111111111111|all of 30 packets were lost: the loss rate is above 0.9050",
        "0101|4 packets are too few: 2 lost",
        "000000000000000000000000000111|no burst was seen to end",
        "111000000000000000000000000000|no burst was seen to begin"
      })
  void tracesThatSayLittleAreToldSo(String digits, String part) {
    LossTrace trace = LossTrace.of(digits);
    assertThat(LossFit.obstacle(trace).orElseThrow()).contains(part);
    assertThatThrownBy(() -> LossFit.of(trace)).isInstanceOf(BadInput.class);
  }

  @Test
  void tracesAreRead() throws IOException {
    Path file = folder.resolve("trace.csv");
    Files.writeString(file, "0\n1\n1\n0");
    assertThat(LossTrace.read(file, Optional.empty()).runs(true, false)).containsExactly(2);
    Files.writeString(file, "\uFEFFlost\r\n 0\r\n1 \r\n");
    assertThat(LossTrace.read(file, Optional.empty()).packets()).isEqualTo(2);
    Files.writeString(file, "time,lost\n7,1\n8,0\n9,1\n");
    LossTrace trace = LossTrace.read(file, Optional.of("lost"));
    assertThat(List.of(trace.packets(), trace.losses())).containsExactly(3, 2);
    assertThat(trace.name()).isEqualTo("trace.csv");
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "''||is empty",
        "lost\\n||a header and no fates",
        "0\\n1\\nx\\n||line 3: 'x'; accepted: 0 (delivered) or 1 (lost)",
        "-1\\n0\\n||line 1: '-1'",
        "2\\n0\\n||line 1: '2'",
        "a,b\\n0,1\\n||line 1: 2 columns; accepted: one, or --column with one of: a, b",
        "a,lost\\n0,1\\n|lots|did you mean 'lost'?",
        "a,lost\\n0\\n|lost|line 2: ''",
        "0\\n\"1\\n||is not CSV"
      })
  void whateverElseIsRefusedInOneLine(String text, String column, String part) throws IOException {
    Path file = folder.resolve("trace.csv");
    Files.writeString(file, text.replace("\\n", "\n"));
    assertThatThrownBy(() -> LossTrace.read(file, Optional.ofNullable(column)))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining(part);
  }

  @Test
  void theTextGivesNumbersWithErrorsAndAPlot() {
    List<String> lines = LossFitText.lines(LossFit.of(simulated(GILBERT, 20_000, 3)));
    assertThat(lines)
        .anyMatch(line -> line.matches("20000 packets, \\d+ lost: loss ratio .*"))
        .anyMatch(line -> line.startsWith("chosen: three-parameter chain (Gilbert)"))
        .anyMatch(line -> line.matches("  r bad to good [0-9.]+ \\(s\\.e\\. [0-9.]+\\)"))
        .anyMatch(line -> line.matches(" +1 +\\d+ +[0-9.]+  #{40}"))
        .anyMatch(line -> line.startsWith(" >12"));
    assertThat(lines)
        .contains("independent or simple chain? A chain fits so much better by chance: p < 0.0001");
    assertThat(lines).noneMatch(line -> line.contains("NaN"));
    assertThat(LossFitText.lines(LossFit.of(SHORT)))
        .anyMatch(line -> line.startsWith("caution: only 3 runs"))
        .contains("three parameters are not fitted to fewer than 20 losses")
        .contains("run lengths: too few runs to test the fit");
  }
}
