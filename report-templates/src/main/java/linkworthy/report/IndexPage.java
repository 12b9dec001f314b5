package linkworthy.report;

import java.util.List;

/**
 * A start page over results folders. Every number is already text.
 *
 * @param title names the folder
 * @param summary how many runs there are, a sentence
 * @param groups the runs by study
 * @param damaged folders that cannot be read
 * @param version version of the program
 */
public record IndexPage(
    String title, String summary, List<Group> groups, List<Damaged> damaged, String version) {
  public IndexPage {
    groups = List.copyOf(groups);
    damaged = List.copyOf(damaged);
  }

  /** The runs of one study, newest first. */
  public record Group(String study, List<Run> runs) {
    public Group {
      runs = List.copyOf(runs);
    }
  }

  /**
   * A run.
   *
   * @param date when it was started
   * @param folder its path as shown
   * @param link relative address of its report, or empty if there is none
   * @param counts pictures, codecs, trials
   * @param isFinished whether it ran to its end
   * @param answer what it found, or how far it came
   */
  public record Run(
      String date,
      String folder,
      String link,
      String purpose,
      String counts,
      boolean isFinished,
      String answer) {}

  /** A folder and what is wrong with it. */
  public record Damaged(String folder, String problem) {}
}
