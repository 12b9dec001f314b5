package linkworthy.codec;

import java.util.ArrayList;
import java.util.List;
import linkworthy.corpus.Picture;
import linkworthy.link.Importance;
import linkworthy.link.Packet;
import linkworthy.noise.MarkovLoss;

/**
 * Expected mean squared error of the transform codec whose basis is fixed in advance, by formula
 * from the clean picture: d variables, n observations, K components kept. Clipping to 0..P is left
 * out, and so is the cropping of padded blocks: their samples count as any other.
 */
public final class ExpectedError {
  /** Means in more packets than this are not followed through all patterns of loss. */
  public static final int MOST_PACKETS = 10;

  /** Variance of rounding to whole grey levels (Sheppard's correction). */
  private static final double ROUNDING = 1.0 / 12;

  /** Rounding adds its full variance to Gaussian noise from about this variance on. */
  private static final double LEAST_VARIANCE = 0.25;

  private final TransformCodec codec;
  private final Picture clean;
  private final Memo memo;
  private final Analysis analysis;

  private ExpectedError(Codec codec, Picture clean, Memo memo) {
    this.codec = (TransformCodec) codec;
    this.clean = clean;
    this.memo = memo;
    this.analysis = this.codec.analysis(clean, memo);
  }

  /** Why there is no formula for Gaussian noise on samples; empty if there is. */
  public static String refusalUnderNoise(Codec codec) {
    if (!(codec instanceof TransformCodec transform)) {
      return "there is no formula for this kind of codec";
    }
    if (transform.basis().isSent()) {
      return "its basis is found in the noisy picture";
    }
    if (!(transform.keep() instanceof Keep.First || transform.keep() instanceof Keep.All)) {
      return "how many components it keeps depends on the noise";
    }
    return transform.quantization() instanceof Quantizer
        ? ""
        : "its steps are too coarse for step^2/12";
  }

  /** Why there is no formula for the loss of packets; empty if there is. */
  public static String refusalUnderLoss(Codec codec) {
    if (!(codec instanceof TransformCodec transform)) {
      return "there is no formula for this kind of codec";
    }
    return transform.basis().isSent() ? "a lost direction drops its component" : "";
  }

  /**
   * Under white Gaussian noise on the samples, {@code (D + (K + (d - K)/n) v + K q) / d + r}: D the
   * energy per observation that the first K components leave of the clean picture (its variances,
   * and what the rounding of the means leaves), v the noise variance and 1/12 for the rounding of
   * the noisy samples, (d - K)/n of which comes in through the means, q = step^2/12, r = 1/12 for
   * the rounding of the picture shown. Where every value stays whole (the means alone, mean
   * removal, or all components without a quantiser) r is 0, and q for mean removal is the mean over
   * the whole numbers from -P to P of the squared error of quantising and rounding.
   *
   * @param codec one that is not {@link #refusalUnderNoise refused}
   * @param variance of the noise before rounding, grey levels squared
   * @return grey levels squared; NaN for a variance above 0 and below 1/4
   */
  public static double underNoise(Codec codec, Picture clean, Memo memo, double variance) {
    return variance > 0 && variance < LEAST_VARIANCE
        ? Double.NaN
        : new ExpectedError(codec, clean, memo).underNoise(variance);
  }

  private double underNoise(double variance) {
    double d = analysis.variables();
    int kept = analysis.kept(codec.keep());
    double noise = variance == 0 ? 0 : variance + ROUNDING;
    double carried = kept + (d - kept) / analysis.observations();
    return (analysis.energyBeyond(kept) + carried * noise + kept * quantising(kept)) / d
        + (staysWhole(kept) ? 0 : ROUNDING);
  }

  private boolean staysWhole(int kept) {
    return kept == 0
        || codec.basis().isIdentity()
        || (kept == analysis.variables() && codec.quantization().isNone());
  }

  private double quantising(int kept) {
    if (kept == 0 || codec.quantization().isNone()) {
      return 0;
    }
    Quantizer quantizer = codec.quantization().component(0);
    if (!codec.basis().isIdentity()) {
      return quantizer.step() * quantizer.step() / 12;
    }
    int peak = clean.peak();
    double sum = 0;
    for (int i = -peak; i <= peak; i++) {
      double error = Math.floor(quantizer.index(i) * quantizer.step() + 0.5) - i;
      sum += error * error;
    }
    return sum / (2 * peak + 1);
  }

  /**
   * Under the loss of packets, {@code F + q E/d + M/d}: F the error without loss, q the loss rate,
   * E the energy per observation that zeros in place of the K coefficients add, {@code z (2 y - z)}
   * for a coefficient y quantised to z; M the squared error of the means, its expectation over all
   * patterns of loss of the packets that hold them. E holds for losses in bursts as well, because
   * the components are orthonormal.
   *
   * @param codec one that is not {@link #refusalUnderLoss refused}
   * @return grey levels squared; NaN if the means are in more than {@link #MOST_PACKETS} packets
   */
  public static double underLoss(Codec codec, Picture clean, Memo memo, MarkovLoss chain) {
    return new ExpectedError(codec, clean, memo).underLoss(chain);
  }

  private double underLoss(MarkovLoss chain) {
    Encoding encoding = codec.encode(clean, memo);
    List<byte[]> withMeans =
        encoding.packets().stream()
            .filter(packet -> packet.importance() == Importance.HEADER)
            .map(Packet::payload)
            .toList();
    if (withMeans.size() > MOST_PACKETS) {
      return Double.NaN;
    }
    double lossFree =
        meanSquaredError(
            codec.decode(PictureShape.of(clean), encoding.payloads()).picture().samples());
    double means =
        meansError(chain, withMeans, new ArrayList<>(), 0, 1 - chain.badShare(), chain.badShare());
    return lossFree
        + (chain.lossRate() * coefficientEnergy(encoding.keep()) + means) / analysis.variables();
  }

  private double meanSquaredError(int[] shown) {
    double sum = 0;
    for (int i = 0; i < shown.length; i++) {
      double error = shown[i] - clean.samples()[i];
      sum += error * error;
    }
    return sum / shown.length;
  }

  private double coefficientEnergy(int kept) {
    Symbols symbols = codec.symbols(clean, memo);
    double sum = 0;
    for (int k = 0; k < kept; k++) {
      double[] values = analysis.component(k);
      int[] sent = symbols.component(k);
      Quantizer quantizer = codec.quantization().component(k);
      for (int j = 0; j < values.length; j++) {
        double shown = quantizer.value(sent[j]);
        sum += shown * (2 * values[j] - shown);
      }
    }
    return sum / analysis.observations();
  }

  /**
   * Expected squared error of the means, summed over the variables.
   *
   * @param arrived of the first {@code at} packets
   * @param good probability of what happened so far and the good state now
   * @param bad the same with the bad state
   */
  private double meansError(
      MarkovLoss chain,
      List<byte[]> packets,
      List<byte[]> arrived,
      int at,
      double good,
      double bad) {
    if (good + bad == 0) {
      return 0;
    }
    if (at == packets.size()) {
      return (good + bad) * meansError(arrived);
    }
    double lost = next(chain, packets, arrived, at, good * (1 - chain.k()), bad * (1 - chain.h()));
    List<byte[]> more = new ArrayList<>(arrived);
    more.add(packets.get(at));
    return lost + next(chain, packets, more, at, good * chain.k(), bad * chain.h());
  }

  private double next(
      MarkovLoss chain,
      List<byte[]> packets,
      List<byte[]> arrived,
      int at,
      double good,
      double bad) {
    return meansError(
        chain,
        packets,
        arrived,
        at + 1,
        good * (1 - chain.p()) + bad * chain.r(),
        good * chain.p() + bad * (1 - chain.r()));
  }

  private double meansError(List<byte[]> arrived) {
    double[] shown = codec.received(PictureShape.of(clean), arrived).means();
    double sum = 0;
    for (int i = 0; i < shown.length; i++) {
      double error = shown[i] - analysis.means()[i];
      sum += error * error;
    }
    return sum;
  }
}
