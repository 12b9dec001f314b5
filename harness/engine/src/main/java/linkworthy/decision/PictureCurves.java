package linkworthy.decision;

import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.Set;
import java.util.function.ToDoubleBiFunction;
import linkworthy.statistics.BcaInterval;
import linkworthy.statistics.StudentT;

/** Two families of codecs in one condition, picture by picture. */
final class PictureCurves {
  private final int pictures;
  private final List<CodecFigures> reference;
  private final List<CodecFigures> test;

  /** Rate and PSNR of each picture. */
  private static final class CodecFigures {
    private final double[] rates;
    private final double[] psnrsDb;

    CodecFigures(Sample sample) {
      rates = sample.figures(Measurements.BITS);
      psnrsDb = sample.figures(Measurements.PSNR);
    }

    RateCurve.Point over(int[] pictures) {
      double rate = 0;
      double psnrDb = 0;
      for (int picture : pictures) {
        rate += rates[picture];
        psnrDb += psnrsDb[picture];
      }
      return new RateCurve.Point(rate / pictures.length, psnrDb / pictures.length);
    }
  }

  private PictureCurves(int pictures, List<CodecFigures> reference, List<CodecFigures> test) {
    this.pictures = pictures;
    this.reference = reference;
    this.test = test;
  }

  /** Empty unless all codecs were measured on the same pictures. */
  static Optional<PictureCurves> of(
      Measurements measured,
      Measurements.Condition condition,
      List<String> reference,
      List<String> test) {
    Set<String> pictures =
        measured
            .find(condition, reference.get(0))
            .map(sample -> sample.means(Measurements.PSNR).keySet())
            .orElse(Set.of());
    List<CodecFigures> of = figures(measured, condition, reference, pictures);
    List<CodecFigures> against = figures(measured, condition, test, pictures);
    return of.size() == reference.size() && against.size() == test.size()
        ? Optional.of(new PictureCurves(pictures.size(), of, against))
        : Optional.empty();
  }

  private static List<CodecFigures> figures(
      Measurements measured,
      Measurements.Condition condition,
      List<String> codecs,
      Set<String> pictures) {
    List<CodecFigures> figures = new ArrayList<>();
    for (String codec : codecs) {
      measured
          .find(condition, codec)
          .filter(sample -> sample.means(Measurements.PSNR).keySet().equals(pictures))
          .map(CodecFigures::new)
          .ifPresent(figures::add);
    }
    return figures;
  }

  /**
   * The interval of a delta between the curves through the means, for other pictures like these;
   * none if the curves of any resample have no delta.
   */
  BcaInterval interval(ToDoubleBiFunction<RateCurve, RateCurve> delta, long seed) {
    return BcaInterval.of(
        pictures,
        cases -> {
          try {
            return delta.applyAsDouble(curve(reference, cases), curve(test, cases));
          } catch (IllegalArgumentException e) {
            return Double.NaN;
          }
        },
        StudentT.CONFIDENCE,
        seed);
  }

  private static RateCurve curve(List<CodecFigures> codecs, int[] cases) {
    return new RateCurve(codecs.stream().map(codec -> codec.over(cases)).toList());
  }
}
