package linkworthy.results;

import static linkworthy.results.CsvTable.number;
import static linkworthy.results.CsvTable.whole;
import static linkworthy.results.CsvTable.words;

import java.nio.file.Path;
import java.util.ArrayList;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.function.Consumer;
import linkworthy.trial.Trial;

/**
 * {@code trials.csv}: a row a trial, in the order of the plan. Behind the fixed columns, each
 * measure of the study besides psnr and ssim has its column. Byte-identical for the same study,
 * corpus and program on any machine. Lines end in LF alone; otherwise RFC 4180.
 */
public final class TrialsCsv {
  /** Name of the file in a results folder. */
  public static final String FILE = "trials.csv";

  static final CsvTable<Trial> TABLE =
      new CsvTable<>(
          List.of(
              words("trial", Trial::trial),
              words("picture", Trial::picture),
              words("impairment", Trial::impairment),
              words("acts_on", Trial::actsOn),
              words("axis", Trial::axis),
              number("severity", Trial::severity),
              number("equivalent_noise_variance", Trial::equivalentNoiseVariance),
              number("realised_noise_variance", Trial::realisedNoiseVariance),
              number("snr_db", Trial::snrDb),
              words("codec", Trial::codec),
              words("transform", Trial::transform),
              words("over", Trial::over),
              words("keep", trial -> keep(trial.keep())),
              words("step", Trial::step),
              whole("replicate", Trial::replicate),
              number("mse", Trial::mse),
              number("psnr_db", Trial::psnrDb),
              number("ssim", Trial::ssim),
              whole("payload_bits", Trial::payloadBits),
              whole("sent_bits", Trial::sentBits),
              number("bits_per_pixel", Trial::bitsPerPixel),
              whole("packets_sent", Trial::packetsSent),
              whole("packets_lost", Trial::packetsLost),
              words("outage", trial -> Boolean.toString(trial.outage())),
              words("failure", Trial::failure)),
          new CsvTable.Further<>(Trial::further, ""),
          TrialsCsv::trial);

  private TrialsCsv() {}

  /** The fixed columns, in order. */
  public static List<String> columns() {
    return TABLE.names();
  }

  /** The header line, then a line for each trial. */
  public static String text(List<Trial> trials) {
    return TABLE.text(trials);
  }

  /**
   * Reads a file trial by trial, without holding them.
   *
   * @return the number of trials
   * @throws linkworthy.input.BadInput if it is missing, cut off, or no table of trials
   * @throws linkworthy.input.Unavailable if it cannot be read
   */
  public static long read(Path file, Consumer<? super Trial> each) {
    return TABLE.read(file, each);
  }

  /** A column of a trial in which two records differ, as each writes it. */
  public record Difference(String column, String recorded, String repeated) {
    @Override
    public String toString() {
      return column + " recorded " + said(recorded) + ", repeated " + said(repeated);
    }

    private static String said(String text) {
      return text.isEmpty() ? "nothing" : text;
    }
  }

  /** The columns, further ones included, in which a repeated trial differs from the recorded. */
  public static List<Difference> differences(Trial recorded, Trial repeated) {
    Set<String> further = new LinkedHashSet<>(repeated.further().keySet());
    further.addAll(recorded.further().keySet());
    Map<String, String> then = TABLE.with(further).fields(recorded);
    List<Difference> differences = new ArrayList<>();
    TABLE
        .with(further)
        .fields(repeated)
        .forEach(
            (column, text) -> {
              String before = String.valueOf(then.get(column));
              if (!before.equals(text)) {
                differences.add(new Difference(column, before, text));
              }
            });
    return differences;
  }

  /** Components in force; empty where there are none. */
  static String keep(int keep) {
    return keep < 0 ? "" : Integer.toString(keep);
  }

  private static Trial trial(CsvRow row) {
    return new Trial(
        row.words("trial"),
        row.words("picture"),
        row.words("impairment"),
        row.words("acts_on"),
        row.words("axis"),
        row.number("severity"),
        row.number("equivalent_noise_variance"),
        row.number("realised_noise_variance"),
        row.number("snr_db"),
        row.words("codec"),
        row.words("transform"),
        row.words("over"),
        row.keep("keep"),
        row.words("step"),
        row.count("replicate"),
        row.number("mse"),
        row.number("psnr_db"),
        row.number("ssim"),
        row.whole("payload_bits", 0, CsvRow.MAX_WHOLE),
        row.whole("sent_bits", 0, CsvRow.MAX_WHOLE),
        row.number("bits_per_pixel"),
        row.count("packets_sent"),
        row.count("packets_lost"),
        row.flag("outage"),
        row.words("failure"),
        row.further(TABLE.names().size(), ""));
  }
}
