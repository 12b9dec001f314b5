package linkworthy.report;

import java.util.List;
import org.jspecify.annotations.Nullable;

/**
 * All that a report shows.
 *
 * @param title name of the study
 * @param question what the study is to decide
 * @param answer the answer; {@link Answer#from} proposes one
 * @param figures a row a cell; codecs and impairments are shown in the order of their first figure
 * @param confidenceLevel level of both intervals and, as its complement, of the paired tests; above
 *     0 and below 1
 * @param costs of the nodes, or null where none were asked for
 * @param comparisons what was derived from the figures, or {@link Comparisons#NONE}
 * @param predictions by formula, beside the measured figures; may be empty
 * @param particulars what is shown beyond the figures, or {@link Particulars#NONE}
 */
public record ReportPage(
    String title,
    String question,
    Answer answer,
    List<Figure> figures,
    double confidenceLevel,
    List<PictureCredit> pictures,
    Provenance provenance,
    @Nullable Costs costs,
    Comparisons comparisons,
    List<Predicted> predictions,
    Particulars particulars) {
  /**
   * @throws IllegalArgumentException if the confidence level is out of range
   */
  public ReportPage {
    if (!(confidenceLevel > 0 && confidenceLevel < 1)) {
      throw new IllegalArgumentException(
          "confidence level is " + confidenceLevel + "; accepted: above 0 and below 1");
    }
    figures = List.copyOf(figures);
    pictures = List.copyOf(pictures);
    predictions = List.copyOf(predictions);
  }
}
