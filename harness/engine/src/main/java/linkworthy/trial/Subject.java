package linkworthy.trial;

import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import linkworthy.codec.Memo;
import linkworthy.codec.PictureShape;
import linkworthy.corpus.Picture;
import linkworthy.noise.SignalStatistics;
import linkworthy.quality.Psnr;
import linkworthy.quality.QualityMeasure;
import linkworthy.quality.QualityMeasures;
import linkworthy.study.SignalPower;
import linkworthy.study.Study;

/**
 * A clean picture with all that its work units share: its statistics, the judges prepared with it,
 * and the encoders' work on it. Safe for several threads.
 */
final class Subject {
  private final List<Picture> planes;
  private final PlaneCoding coding;
  private final List<Picture> coded;
  private final SignalStatistics signal;
  private final List<QualityMeasure.Judge> judges;
  private final Map<String, QualityMeasure.Judge> furtherJudges = new LinkedHashMap<>();
  private final List<Memo> memos;

  /**
   * @param planes luma, or luma and the two colour planes, all of one size
   */
  Subject(List<Picture> planes, Study study) {
    this.planes = planes;
    this.coding = new PlaneCoding(study.pictures());
    this.coded = coding.coded(planes);
    this.signal = signal(planes, study.pictures().signalPower());
    this.judges =
        study.measures().stream().map(m -> QualityMeasures.get(m).against(picture())).toList();
    for (QualityMeasure measure : study.furtherMeasures()) {
      furtherJudges.put(measure.column(), judges.get(study.measures().indexOf(measure.id())));
    }
    this.memos = memos(planes);
  }

  /** Statistics of all planes together: the mean over the planes of each figure. */
  static SignalStatistics signal(List<Picture> planes, SignalPower signalPower) {
    double power = 0;
    double mean = 0;
    double meanSquare = 0;
    double variance = 0;
    for (Picture plane : planes) {
      SignalStatistics one = signalPower.of(plane);
      power += one.power();
      mean += one.mean();
      meanSquare += one.meanSquare();
      variance += one.variance();
    }
    int n = planes.size();
    return new SignalStatistics(
        power / n, mean / n, meanSquare / n, variance / n, planes.get(0).peak());
  }

  /** A fresh memo for each plane. */
  static List<Memo> memos(List<Picture> planes) {
    return planes.stream().map(plane -> new Memo()).toList();
  }

  /** Luma, which the measures of structure look at. */
  Picture picture() {
    return planes.get(0);
  }

  /** All planes at full size. */
  List<Picture> planes() {
    return planes;
  }

  /** Mean squared error over all samples of all planes at full size, grey levels squared. */
  double meanSquaredError(List<Picture> others) {
    double sum = 0;
    for (int plane = 0; plane < planes.size(); plane++) {
      sum += Psnr.meanSquaredError(planes.get(plane), others.get(plane));
    }
    return sum / planes.size();
  }

  /** How the planes go through a codec. */
  PlaneCoding coding() {
    return coding;
  }

  /** The planes as they are coded. */
  List<Picture> coded() {
    return coded;
  }

  /** Shapes of the planes as they are coded. */
  List<PictureShape> shapes() {
    return coded.stream().map(PictureShape::of).toList();
  }

  SignalStatistics signal() {
    return signal;
  }

  /** One judge for each measure of the study, in its order. */
  List<QualityMeasure.Judge> judges() {
    return judges;
  }

  /** The judges of the measures besides psnr and ssim, by column, in study order. */
  Map<String, QualityMeasure.Judge> furtherJudges() {
    return furtherJudges;
  }

  /** Encoders' work on the clean luma plane. */
  Memo memo() {
    return memos.get(0);
  }

  /** Encoders' work on each clean plane. */
  List<Memo> memos() {
    return memos;
  }
}
