package linkworthy.report;

import java.util.List;
import org.jspecify.annotations.Nullable;

/**
 * What a report shows beyond the figures of its cells.
 *
 * @param spreads quality over pictures, a row for each condition and codec it was gathered for
 * @param gallery pictures to look at
 * @param shortlist what stated needs say of the codecs, or null where none were stated
 * @param study the study as it was run, every default written out, or empty
 * @param verified what the program has checked of the record, a sentence each
 */
public record Particulars(
    List<Spread> spreads,
    Gallery gallery,
    @Nullable ShortlistPage shortlist,
    String study,
    List<String> verified) {
  /** Nothing beyond the figures. */
  public static final Particulars NONE =
      new Particulars(List.of(), Gallery.NONE, null, "", List.of());

  public Particulars {
    spreads = List.copyOf(spreads);
    verified = List.copyOf(verified);
  }

  /**
   * The quality that a codec gives each picture in a condition.
   *
   * @param codec its label
   * @param psnrDb mean PSNR over the replicates of each picture, in the study's order; NaN where
   *     there is none
   */
  public record Spread(Condition condition, String codec, List<Double> psnrDb) {
    public Spread {
      psnrDb = List.copyOf(psnrDb);
    }
  }
}
