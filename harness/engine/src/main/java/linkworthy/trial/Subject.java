package linkworthy.trial;

import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
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
  private final Map<String, QualityMeasure.Judge> furtherJudges = new LinkedHashMap<>();
  private final Memo memo = new Memo();

  Subject(Picture picture, Study study) {
    this.picture = picture;
    this.signal = study.pictures().signalPower().of(picture);
    this.judges =
        study.measures().stream().map(m -> QualityMeasures.get(m).against(picture)).toList();
    for (QualityMeasure measure : study.furtherMeasures()) {
      furtherJudges.put(measure.column(), judges.get(study.measures().indexOf(measure.id())));
    }
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

  /** The judges of the measures besides psnr and ssim, by column, in study order. */
  Map<String, QualityMeasure.Judge> furtherJudges() {
    return furtherJudges;
  }

  /** Encoders' work on the clean picture. */
  Memo memo() {
    return memo;
  }
}
