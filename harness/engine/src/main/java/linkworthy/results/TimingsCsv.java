package linkworthy.results;

import static linkworthy.results.CsvTable.number;
import static linkworthy.results.CsvTable.whole;
import static linkworthy.results.CsvTable.words;

import java.nio.file.Path;
import java.util.List;
import java.util.function.Consumer;
import linkworthy.trial.Timing;

/**
 * {@code timings.csv}: measured encode and decode times, which no rerun repeats and which are kept
 * apart for that reason. Lines end in LF alone; otherwise RFC 4180.
 */
public final class TimingsCsv {
  /** Name of the file in a results folder. */
  public static final String FILE = "timings.csv";

  static final CsvTable<Timing> TABLE =
      new CsvTable<>(
          List.of(
              words("picture", Timing::picture),
              words("impairment", Timing::impairment),
              number("severity", Timing::severity),
              whole("replicate", Timing::replicate),
              words("codec", Timing::codec),
              number("encode_ms", Timing::encodeMs),
              number("decode_ms", Timing::decodeMs)),
          TimingsCsv::timing);

  private TimingsCsv() {}

  /** The columns, in order. */
  public static List<String> columns() {
    return TABLE.names();
  }

  /**
   * Reads a file row by row.
   *
   * @return the number of rows
   * @throws linkworthy.input.BadInput if it is missing, cut off, or no table of timings
   * @throws linkworthy.input.Unavailable if it cannot be read
   */
  public static long read(Path file, Consumer<? super Timing> each) {
    return TABLE.read(file, each);
  }

  private static Timing timing(CsvRow row) {
    return new Timing(
        row.words("picture"),
        row.words("impairment"),
        row.number("severity"),
        row.count("replicate"),
        row.words("codec"),
        row.number("encode_ms"),
        row.number("decode_ms"));
  }
}
