package linkworthy.results;

import static linkworthy.results.CsvTable.words;

import java.io.BufferedOutputStream;
import java.io.IOException;
import java.io.InputStream;
import java.io.OutputStream;
import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import java.security.MessageDigest;
import java.security.NoSuchAlgorithmException;
import java.util.ArrayList;
import java.util.HexFormat;
import java.util.List;
import java.util.function.Consumer;
import linkworthy.codec.Failure;
import linkworthy.input.BadInput;
import linkworthy.trial.Course;
import linkworthy.trial.LocalRunner;
import linkworthy.trial.Mishap;
import linkworthy.trial.Plan;
import linkworthy.trial.Stretch;
import linkworthy.trial.Timing;
import linkworthy.trial.Trial;
import linkworthy.trial.WorkUnit;
import org.jspecify.annotations.Nullable;

/**
 * The rows of one {@link Stretch} of a plan on their way from the machine that ran it to the
 * record: lines of text, for each unit its number, its rows as {@code trials.csv} has them, their
 * times as {@code timings.csv} has them, and the codecs' failures. The first line says of which run
 * and stretch they are, the last has the SHA-256 of all before, so that a file that was cut off or
 * altered is never taken.
 */
public final class PartFile {
  private static final String HEAD = "linkworthy-part";
  private static final String UNIT = "unit";
  private static final String END = "end";

  private static final CsvTable<Mishap> MISHAPS =
      new CsvTable<>(
          List.of(
              words("codec", Mishap::codec),
              words("picture", Mishap::picture),
              words("failure", mishap -> mishap.failure().word()),
              words("detail", mishap -> mishap.failure().detail())),
          row ->
              new Mishap(
                  row.words("codec"),
                  row.words("picture"),
                  new Failure(row.words("failure"), row.words("detail"))));

  private PartFile() {}

  /** Writes a part unit by unit; it counts once {@link #end} has returned. */
  public static final class Writer {
    private final OutputStream out;
    private final CsvTable<Trial> trials;
    private final MessageDigest digest = sha256();

    /**
     * @param out is left open
     * @param run names what is run, in letters and digits
     * @throws IOException if it cannot be written
     */
    public Writer(OutputStream out, Plan plan, String run, Stretch stretch) throws IOException {
      this.out = new BufferedOutputStream(out, 1 << 16);
      this.trials = TrialsCsv.TABLE.with(plan.study().furtherColumns());
      write(head(run, stretch));
    }

    /**
     * Adds a unit.
     *
     * @throws IOException if it cannot be written
     */
    public void append(WorkUnit unit, List<Trial> rows, List<Timing> timings, List<Mishap> mishaps)
        throws IOException {
      write(line(UNIT, unit.index(), mishaps.size()));
      write(trials.lines(rows));
      write(TimingsCsv.TABLE.lines(timings));
      write(MISHAPS.lines(mishaps));
    }

    /**
     * Adds the last line.
     *
     * @throws IOException if it cannot be written
     */
    public void end() throws IOException {
      out.write(line(END, hex(digest)).getBytes(StandardCharsets.UTF_8));
      out.flush();
    }

    private void write(String text) throws IOException {
      byte[] bytes = text.getBytes(StandardCharsets.UTF_8);
      digest.update(bytes);
      out.write(bytes);
    }
  }

  /**
   * Whether this is a whole part of that run and stretch, as it was written.
   *
   * @throws IOException if it cannot be read
   */
  public static boolean isWhole(InputStream in, String run, Stretch stretch) throws IOException {
    LineInput lines = new LineInput(in);
    MessageDigest digest = sha256();
    byte[] line = lines.next();
    if (line == null || !text(line).equals(head(run, stretch))) {
      return false;
    }
    byte[] next = line;
    while (next != null) {
      line = next;
      next = lines.next();
      if (next != null) {
        digest.update(line);
      }
    }
    return lines.atEnd() && text(line).equals(line(END, hex(digest)));
  }

  /**
   * Hands over the units of a {@link #isWhole whole} part from the next one of a course on, and
   * moves the course on behind each. Units before that are passed over.
   *
   * @param file names the part in messages
   * @param mishaps takes the codecs' failures before the rows of their unit
   * @throws BadInput if the rows are not those of the plan
   * @throws IOException if it cannot be read
   */
  public static void read(
      Path file,
      InputStream in,
      Plan plan,
      Course course,
      Consumer<? super Mishap> mishaps,
      LocalRunner.Sink sink)
      throws IOException {
    Reader reader = new Reader(file, new LineInput(in), plan);
    reader.line();
    for (int[] unit = reader.unit(); unit != null; unit = reader.unit()) {
      if (unit[0] < course.next()) {
        reader.pass(unit[1]);
      } else {
        reader.take(unit, course, mishaps, sink);
      }
    }
  }

  private static final class Reader {
    private final Path file;
    private final LineInput lines;
    private final CsvTable<Trial> trials;
    private final int codecs;
    private long number;

    Reader(Path file, LineInput lines, Plan plan) {
      this.file = file;
      this.lines = lines;
      this.trials = TrialsCsv.TABLE.with(plan.study().furtherColumns());
      this.codecs = plan.study().codecs().size();
    }

    byte[] line() throws IOException {
      number++;
      byte[] line = lines.next();
      if (line == null) {
        throw damaged();
      }
      return line;
    }

    /** Place of the next unit and how many failures it has; null at the end. */
    int @Nullable [] unit() throws IOException {
      String[] words = text(line()).strip().split(",", -1);
      if (words[0].equals(END)) {
        return null;
      }
      if (words.length != 3 || !words[0].equals(UNIT)) {
        throw damaged();
      }
      return new int[] {Integer.parseInt(words[1]), Integer.parseInt(words[2])};
    }

    void pass(int mishaps) throws IOException {
      for (int i = 0; i < 2 * codecs + mishaps; i++) {
        byte[] unused = line();
      }
    }

    void take(int[] unit, Course course, Consumer<? super Mishap> mishaps, LocalRunner.Sink sink)
        throws IOException {
      if (course.isAtEnd() || unit[0] != course.next()) {
        throw damaged();
      }
      List<Trial> rows = rows(trials, codecs);
      List<Timing> timings = rows(TimingsCsv.TABLE, codecs);
      rows(MISHAPS, unit[1]).forEach(mishaps);
      WorkUnit at = course.unit();
      for (Trial row : rows) {
        if (!row.trial().equals(course.trialId())) {
          throw damaged();
        }
        course.add(row);
      }
      sink.accept(at, rows, timings);
    }

    private <T> List<T> rows(CsvTable<T> table, int count) throws IOException {
      List<T> rows = new ArrayList<>();
      for (int i = 0; i < count; i++) {
        byte[] line = line();
        rows.add(table.trustedRow(file, number, line));
      }
      return rows;
    }

    private BadInput damaged() {
      return new BadInput(
          file + ", line " + number + " is not of this run; accepted: a part as a task wrote it");
    }
  }

  private static String head(String run, Stretch stretch) {
    return line(HEAD, run, stretch.first(), stretch.end());
  }

  private static String line(Object... words) {
    List<String> texts = new ArrayList<>();
    for (Object word : words) {
      texts.add(String.valueOf(word));
    }
    return String.join(",", texts) + "\n";
  }

  private static String text(byte[] line) {
    return new String(line, StandardCharsets.UTF_8);
  }

  private static String hex(MessageDigest digest) {
    return HexFormat.of().formatHex(digest.digest());
  }

  private static MessageDigest sha256() {
    try {
      return MessageDigest.getInstance("SHA-256");
    } catch (NoSuchAlgorithmException e) {
      throw new IllegalStateException("every Java has SHA-256", e);
    }
  }
}
