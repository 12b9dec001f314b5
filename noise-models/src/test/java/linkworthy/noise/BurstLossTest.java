package linkworthy.noise;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.List;
import java.util.Map;
import java.util.stream.IntStream;
import linkworthy.corpus.Picture;
import linkworthy.corpus.TestPattern;
import linkworthy.input.BadInput;
import org.apache.commons.rng.UniformRandomProvider;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class BurstLossTest extends NoiseProcessContractTest {
  private static final SignalStatistics SIGNAL = SignalStatistics.of(TestPattern.cvp(64));

  @Override
  protected String id() {
    return "burst-loss";
  }

  /** With the default mean burst of 4 at most 4/5 can be lost. */
  @Override
  protected List<Severity> refused() {
    return List.of(
        new Severity("loss-rate", 0.81),
        new Severity("loss-rate", 1),
        new Severity("loss-rate", 1.5),
        new Severity("loss-rate", -Double.MIN_VALUE),
        new Severity("density", 0.1));
  }

  private static Impairment at(Severity severity, Map<String, Double> parameters, Site site) {
    return new BurstLoss().at(severity, parameters, site, SIGNAL);
  }

  /** q = 10^(-SNR/10) where the signal power is the variance: 10 dB is a loss of 10 %. */
  @Test
  void tenDecibelsAreTheSameLossesAsTenPerCent() {
    Severity snr = new Severity(Severity.SNR_DB, 10);
    Severity rate = new Severity("loss-rate", 0.1);
    for (Site site : List.of(Site.PACKETS, Site.SAMPLES)) {
      assertThat(at(snr, Map.of(), site).equivalentNoiseVariance())
          .isCloseTo(0.1 * SIGNAL.variance(), within(1e-9));
      assertThat(at(rate, Map.of(), site).equivalentNoiseVariance())
          .isCloseTo(0.1 * SIGNAL.variance(), within(1e-9));
    }
    assertThat(lost(at(snr, Map.of(), Site.PACKETS), Measured.stream(31), 2000))
        .isEqualTo(lost(at(rate, Map.of(), Site.PACKETS), Measured.stream(31), 2000));
  }

  @Test
  void signalPowerAndVarianceAreKeptApart() {
    SignalStatistics meanSquare =
        new SignalStatistics(
            SIGNAL.meanSquare(), SIGNAL.mean(), SIGNAL.meanSquare(), SIGNAL.variance(), 255);
    double lossRate = 0.2;
    double snr = 10 * StrictMath.log10(SIGNAL.meanSquare() / (lossRate * SIGNAL.variance()));
    Impairment.OnPackets impairment =
        (Impairment.OnPackets)
            new BurstLoss()
                .at(new Severity(Severity.SNR_DB, snr), Map.of(), Site.PACKETS, meanSquare);
    assertThat(impairment.equivalentNoiseVariance())
        .isCloseTo(lossRate * SIGNAL.variance(), within(1e-9));
    assertThat(
            new BurstLoss()
                .at(new Severity("loss-rate", lossRate), Map.of(), Site.PACKETS, meanSquare)
                .equivalentNoiseVariance())
        .isEqualTo(lossRate * SIGNAL.variance());
    assertThat(lost(impairment, Measured.stream(32), 2000))
        .isEqualTo(
            lost(
                at(new Severity("loss-rate", lossRate), Map.of(), Site.PACKETS),
                Measured.stream(32),
                2000));
  }

  /** Recomputed independently in Python: stream, first state, transitions; loss 10 %, burst 4. */
  @Test
  void firstLossesAtAnAddressNeverChange() {
    UniformRandomProvider random =
        NoiseStreams.open(
            7,
            "field/a\u00f1il-01",
            "0123456789abcdef",
            Site.SAMPLES,
            new Severity(Severity.SNR_DB, 20),
            3,
            "noise");
    assertThat(lost(at(new Severity("loss-rate", 0.1), Map.of(), Site.PACKETS), random, 200))
        .containsExactly(
            76, 77, 112, 113, 114, 115, 116, 117, 118, 128, 129, 130, 131, 132, 133, 134, 135, 136,
            141, 170, 171, 172, 173, 174, 175, 176, 177, 178, 179, 180, 181, 182, 190, 191, 192,
            193, 199);
  }

  @Test
  void lostSamplesShowTheRoundedMean() {
    Picture clean = new Picture(4, 256, 8, IntStream.range(0, 1024).map(i -> i % 2).toArray());
    Impairment.OnSamples impairment =
        (Impairment.OnSamples)
            new BurstLoss()
                .at(
                    new Severity("loss-rate", 0.5),
                    Map.of(),
                    Site.SAMPLES,
                    SignalStatistics.of(clean));
    Picture shown = impairment.apply(clean, Measured.stream(33));
    List<Integer> lost =
        lost(at(new Severity("loss-rate", 0.5), Map.of(), Site.PACKETS), Measured.stream(33), 1024);
    assertThat(lost).isNotEmpty();
    for (int i = 0; i < 1024; i++) {
      assertThat(shown.samples()[i]).isEqualTo(lost.contains(i) ? 1 : clean.samples()[i]);
    }
  }

  /**
   * Loss ratio of 1e5 packets with a general chain, within 5 standard errors that count the bursts
   * (false-alarm rate 5.7e-7 each).
   */
  @ParameterizedTest
  @CsvSource({"0.1, 2, 0.999, 0.4", "0.3, 10, 0.9, 0", "0.5, 1, 1, 0"})
  void parametersSetTheChain(double lossRate, double burst, double good, double bad) {
    Map<String, Double> parameters =
        Map.of("mean-burst", burst, "delivery-good", good, "delivery-bad", bad);
    int n = 100_000;
    List<Integer> lost =
        lost(
            at(new Severity("loss-rate", lossRate), parameters, Site.PACKETS),
            Measured.stream(34),
            n);
    MarkovLoss chain = MarkovLoss.of(lossRate, burst, good, bad);
    assertThat((double) lost.size())
        .isCloseTo(n * lossRate, within(5 * Math.sqrt(chain.varianceOfLosses(n)) + 1));
  }

  @Test
  void lossesOutOfReachAreRefusedWithTheirLimit() {
    assertThatThrownBy(() -> at(new Severity(Severity.SNR_DB, 0), Map.of(), Site.PACKETS))
        .isInstanceOf(BadInput.class)
        .hasMessageStartingWith("burst-loss at snr-db 0.0 on this picture: loss-rate is 1.0;")
        .hasMessageContaining("accepted with mean-burst 4.0,")
        .hasMessageEndingWith(": 0.0 to 0.8");
    assertThatThrownBy(
            () ->
                new BurstLoss()
                    .at(
                        new Severity(Severity.VARIANCE, 5),
                        Map.of(),
                        Site.SAMPLES,
                        SignalStatistics.of(Measured.flat(4, 4, 8, 9))))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("the picture's variance is 0 grey levels squared");
    assertThatThrownBy(
            () ->
                at(
                    new Severity("loss-rate", 0.1),
                    Map.of("mean-burst", Math.nextDown(1.0)),
                    Site.PACKETS))
        .isInstanceOf(BadInput.class)
        .hasMessageStartingWith("mean-burst is 0.99");
    assertThat(at(new Severity("loss-rate", 0.8), Map.of(), Site.PACKETS).equivalentNoiseVariance())
        .isEqualTo(0.8 * SIGNAL.variance());
  }

  private static List<Integer> lost(Impairment impairment, UniformRandomProvider random, int n) {
    Impairment.Losses losses = ((Impairment.OnPackets) impairment).losses(random);
    return IntStream.range(0, n).filter(losses::lost).boxed().toList();
  }
}
