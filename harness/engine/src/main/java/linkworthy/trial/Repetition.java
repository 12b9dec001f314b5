package linkworthy.trial;

import java.util.ArrayList;
import java.util.List;
import linkworthy.corpus.Picture;
import linkworthy.study.CodecChoice;

/**
 * Repeats single trials of a plan: no other unit is run, and no other codec. By the rule that a
 * trial depends on its key alone it gives the same row as the whole run did. Pictures are checked
 * against their checksums as they are read. Safe for several threads.
 */
public final class Repetition {
  private final Plan plan;
  private final Subjects subjects;

  /**
   * @param threads that will ask at the same time
   */
  public Repetition(Plan plan, int threads) {
    this.plan = plan;
    this.subjects = new Subjects(plan, threads + 1);
  }

  /**
   * A repeated trial with its pictures; of several planes, luma.
   *
   * @param trial its row
   * @param clean the picture itself
   * @param seen what the encoder saw: the noisy picture where the noise acts on samples, else the
   *     clean one
   * @param decoded what the receiver shows
   */
  public record Scene(Trial trial, Picture clean, Picture seen, Picture decoded) {}

  /**
   * The rows of these codecs in a unit, on the same noise.
   *
   * @throws linkworthy.input.BadInput if the picture is not what its manifest says
   * @throws linkworthy.input.Unavailable if it cannot be read
   */
  public List<Trial> trials(WorkUnit unit, List<CodecChoice> codecs) {
    return new UnitRunner(plan.study(), subjects.get(unit), unit)
        .run(codecs, (seen, decoded) -> {})
        .trials();
  }

  /**
   * One trial and its pictures.
   *
   * @throws linkworthy.input.BadInput if the picture is not what its manifest says
   * @throws linkworthy.input.Unavailable if it cannot be read
   */
  public Scene scene(WorkUnit unit, CodecChoice codec) {
    Subject subject = subjects.get(unit);
    List<Picture> pictures = new ArrayList<>();
    List<Trial> trials =
        new UnitRunner(plan.study(), subject, unit)
            .run(
                List.of(codec),
                (seen, decoded) -> {
                  pictures.add(seen);
                  pictures.add(decoded);
                })
            .trials();
    return new Scene(trials.get(0), subject.picture(), pictures.get(0), pictures.get(1));
  }
}
