package linkworthy.trial;

import java.util.List;
import linkworthy.codec.Memo;
import linkworthy.codec.PictureShape;
import linkworthy.corpus.Picture;
import linkworthy.noise.SignalStatistics;
import linkworthy.quality.QualityMeasure;
import linkworthy.quality.QualityMeasures;
import linkworthy.study.Study;

/**
 * A clean picture with all that its work units share: its statistics, the judges prepared with it,
 * and the encoders' work on it. Safe for several threads.
 */
final class Subject {
  private final Picture picture;
  private final SignalStatistics signal;
  private final List<QualityMeasure.Judge> judges;
  private final Memo memo = new Memo();

  Subject(Picture picture, Study study) {
    this.picture = picture;
    this.signal = study.pictures().signalPower().of(picture);
    this.judges =
        study.measures().stream().map(m -> QualityMeasures.get(m).against(picture)).toList();
  }

  Picture picture() {
    return picture;
  }

  PictureShape shape() {
    return PictureShape.of(picture);
  }

  SignalStatistics signal() {
    return signal;
  }

  /** One judge for each measure of the study, in its order. */
  List<QualityMeasure.Judge> judges() {
    return judges;
  }

  /** Encoders' work on the clean picture. */
  Memo memo() {
    return memo;
  }
}
