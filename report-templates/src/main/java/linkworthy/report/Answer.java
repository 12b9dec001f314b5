package linkworthy.report;

import java.util.List;

/**
 * The answer to a study's question.
 *
 * @param sentence one sentence
 * @param confidence what it rests on, and how sure it is
 * @param exceptions where it does not hold, a sentence each
 * @param reasons why, a sentence each
 * @param codec label of the codec that it names, or empty
 */
public record Answer(
    String sentence,
    String confidence,
    List<String> exceptions,
    List<String> reasons,
    String codec) {
  /** An answer that names no codec. */
  public Answer(String sentence, String confidence, List<String> exceptions, List<String> reasons) {
    this(sentence, confidence, exceptions, reasons, "");
  }

  public Answer {
    exceptions = List.copyOf(exceptions);
    reasons = List.copyOf(reasons);
  }

  /**
   * A plain answer from the figures alone: the codec that sends the fewest bits per pixel among
   * those whose mean PSNR, averaged over all noisy conditions with equal weight, is within 0.5 dB
   * of the best (a margin of common practice, without source). Codecs that lack a figure in some
   * condition do not compete. Without noisy conditions the clean one is used, and the answer says
   * so.
   *
   * @throws IllegalArgumentException if two figures are of one codec in one condition
   */
  public static Answer from(List<Figure> figures) {
    return new DefaultAnswer(new FigureGrid(figures)).answer();
  }
}
