package linkworthy.codec;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import linkworthy.corpus.Picture;
import linkworthy.corpus.TestPattern;
import linkworthy.input.YamlNode;
import linkworthy.link.Link;
import linkworthy.noise.GaussianNoise;
import linkworthy.noise.Impairment;
import linkworthy.noise.MarkovLoss;
import linkworthy.noise.Severity;
import linkworthy.noise.SignalStatistics;
import linkworthy.noise.Site;
import org.apache.commons.rng.UniformRandomProvider;
import org.apache.commons.rng.core.source64.SplitMix64;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class ExpectedErrorTest {
  private static final int DRAWS = 20;
  private static final int LOSSES = 2000;

  private static Codec codec(String entry, Link.Order order) {
    return CodecFamilies.installed()
        .read(YamlNode.parse("test", entry), new Link(96, 23, order))
        .get(0);
  }

  private static Codec codec(String entry) {
    return codec(entry, Link.Order.BY_COMPONENT);
  }

  private static double meanSquaredError(Picture a, Picture b) {
    double sum = 0;
    for (int i = 0; i < a.size(); i++) {
      double e = a.samples()[i] - b.samples()[i];
      sum += e * e;
    }
    return sum / a.size();
  }

  /**
   * The pattern lies in 32 to 219, so noise of up to 64 grey levels squared (four deviations: 32)
   * is hardly clipped. Limit 0.1 dB, 2.3 %: over 20 draws noise on at least 4 x 1024 coefficients
   * has a relative standard deviation of sqrt(2 / 81920) = 0.5 %, which makes a false alarm rarer
   * than 1 in 100 000; the rest is for what the formula leaves out.
   */
  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "{transform: dct, keep: 4, step: 4} | 16",
        "{transform: dct, keep: 16, step: 4} | 4",
        "{transform: dct, keep: 16, step: 8} | 64",
        "{transform: dct, keep: 64, step: 4} | 16",
        "{transform: dct, keep: 64, step: none} | 16",
        "{transform: dct, over: rows, keep: 200, step: 4} | 64",
        "{transform: wht, keep: 32, step: 2} | 16",
        "{transform: mean, step: 4} | 16",
        "{transform: mean, step: 1} | 4",
        "{transform: mean, keep: 0} | 64",
        "{transform: dct, keep: 16, step: 0.5} | 0"
      })
  void gaussianNoiseDoesWhatTheFormulaSays(String entry, double variance) {
    Codec codec = codec(entry);
    Picture clean = TestPattern.cvp(256);
    Impairment.OnSamples noise =
        (Impairment.OnSamples)
            new GaussianNoise()
                .at(
                    new Severity(Severity.VARIANCE, variance),
                    Map.of(),
                    Site.SAMPLES,
                    SignalStatistics.of(clean));
    UniformRandomProvider random = new SplitMix64(20_261_201);
    double measured = 0;
    for (int i = 0; i < DRAWS; i++) {
      Picture noisy = noise.apply(clean, random);
      List<byte[]> packets = codec.encode(noisy, new Memo()).payloads();
      measured +=
          meanSquaredError(clean, codec.decode(PictureShape.of(clean), packets).picture()) / DRAWS;
    }
    assertThat(codec).extracting(ExpectedError::refusalUnderNoise).isEqualTo("");
    double expected = ExpectedError.underNoise(codec, clean, new Memo(), variance);
    assertThat(10 * StrictMath.log10(measured / expected)).isCloseTo(0, within(0.1));
  }

  /**
   * Within 5 standard errors of the mean over 2000 realisations, a false alarm of about 1 in a
   * million; the formula leaves out only clipping, and the rounding of the picture shown where
   * something is missing, 1/12 at most.
   */
  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "{transform: dct, keep: 16, step: 8} | BY_COMPONENT | 0.1 | 1",
        "{transform: dct, keep: 16, step: 8} | BY_COMPONENT | 0.1 | 4",
        "{transform: dct, keep: 16, step: 8} | BY_REGION | 0.1 | 4",
        "{transform: dct, over: rows, keep: 16, step: 8} | BY_REGION | 0.05 | 2",
        "{transform: mean, step: 16} | BY_COMPONENT | 0.1 | 4",
        "{transform: mean, keep: 0} | BY_COMPONENT | 0.3 | 4"
      })
  void lostPacketsDoWhatTheFormulaSays(
      String entry, Link.Order order, double lossRate, double burst) {
    Codec codec = codec(entry, order);
    Picture clean = TestPattern.cvp(64);
    List<byte[]> packets = codec.encode(clean, new Memo()).payloads();
    MarkovLoss chain = MarkovLoss.simple(lossRate, burst);
    UniformRandomProvider random = new SplitMix64(20_261_202);
    double sum = 0;
    double squares = 0;
    for (int i = 0; i < LOSSES; i++) {
      Impairment.Losses losses = chain.losses(random);
      List<byte[]> arrived = new ArrayList<>();
      for (int p = 0; p < packets.size(); p++) {
        if (!losses.lost(p)) {
          arrived.add(packets.get(p));
        }
      }
      double error =
          meanSquaredError(clean, codec.decode(PictureShape.of(clean), arrived).picture());
      sum += error;
      squares += error * error;
    }
    double mean = sum / LOSSES;
    double standardError = Math.sqrt((squares / LOSSES - mean * mean) / LOSSES);
    assertThat(ExpectedError.refusalUnderLoss(codec)).isEmpty();
    assertThat(ExpectedError.underLoss(codec, clean, new Memo(), chain))
        .isCloseTo(mean, within(5 * standardError + 1.0 / 12));
  }

  @Test
  void withoutLossTheErrorIsThatOfTheCodec() {
    Codec codec = codec("{transform: dct, keep: 16, step: 8}");
    Picture clean = TestPattern.cvp(64);
    Picture shown =
        codec.decode(PictureShape.of(clean), codec.encode(clean, new Memo()).payloads()).picture();
    assertThat(ExpectedError.underLoss(codec, clean, new Memo(), MarkovLoss.simple(0, 4)))
        .isEqualTo(meanSquaredError(clean, shown));
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "{transform: pca, keep: 4} | its basis is found in the noisy picture | a lost direction",
        "{transform: dct, share: 0.9} | how many components it keeps | ''",
        "{transform: dct, bits-per-pixel: 1} | how many components it keeps | ''",
        "{transform: dct, keep: 64, weights: luminance, quality: 50} | its steps | ''",
        "{transform: dct, over: tiles, grid: 2x2, keep: 4} | no formula | no formula"
      })
  void whatThereIsNoFormulaForIsSaid(String entry, String underNoise, String underLoss) {
    assertThat(ExpectedError.refusalUnderNoise(codec(entry))).contains(underNoise);
    String refusal = ExpectedError.refusalUnderLoss(codec(entry));
    assertThat(refusal).contains(underLoss);
    assertThat(refusal.isEmpty()).isEqualTo(underLoss.isEmpty());
  }

  @Test
  void thereIsNoFormulaForNoiseThatRoundingRemovesAndForMeansInManyPackets() {
    Memo memo = new Memo();
    Picture clean = new Picture(8, 1024, 8, new int[8 * 1024]);
    Codec rows = codec("{transform: mean, step: 8}");
    assertThat(ExpectedError.underNoise(rows, clean, memo, 0.2)).isNaN();
    assertThat(ExpectedError.underLoss(rows, clean, memo, MarkovLoss.simple(0.1, 4))).isNaN();
  }
}
