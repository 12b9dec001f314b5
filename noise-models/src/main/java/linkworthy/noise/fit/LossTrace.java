package linkworthy.noise.fit;

import java.io.ByteArrayInputStream;
import java.io.IOException;
import java.io.InputStream;
import java.io.InputStreamReader;
import java.io.UncheckedIOException;
import java.nio.charset.CharacterCodingException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.NoSuchFileException;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.BitSet;
import java.util.Iterator;
import java.util.List;
import java.util.Optional;
import linkworthy.corpus.Manifest;
import linkworthy.input.BadInput;
import linkworthy.input.Spelling;
import linkworthy.input.Unavailable;
import org.apache.commons.csv.CSVFormat;
import org.apache.commons.csv.CSVParser;
import org.apache.commons.csv.CSVRecord;

/** Recorded fates of packets, in the order they were sent. */
public final class LossTrace {
  private static final int MAX_BYTES = 64 << 20;
  private static final int MAX_SHOWN = 20;
  private static final String ACCEPTED = "; accepted: 0 (delivered) or 1 (lost)";

  private final String name;
  private final String sha256;
  private final BitSet lost;
  private final int packets;

  private LossTrace(String name, String sha256, BitSet lost, int packets) {
    this.name = name;
    this.sha256 = sha256;
    this.lost = lost;
    this.packets = packets;
  }

  /**
   * Reads a CSV file (RFC 4180, UTF-8, at most 64 MiB) with a fate a line, 0 delivered and 1 lost.
   * The first line may be a header; empty lines do not count.
   *
   * @param column name of the column that holds the fates; may be left out where there is one
   * @throws BadInput if the file is missing, empty, or holds anything else; with the line
   * @throws Unavailable if it exists and cannot be read
   */
  public static LossTrace read(Path csv, Optional<String> column) {
    if (Files.isDirectory(csv)) {
      throw new BadInput(csv + " is a folder; accepted: a file of 0 and 1, one a line");
    }
    byte[] bytes;
    try (InputStream in = Files.newInputStream(csv)) {
      bytes = in.readNBytes(MAX_BYTES + 1);
    } catch (NoSuchFileException e) {
      throw new BadInput(csv + " does not exist; accepted: a file of 0 and 1, one a line", e);
    } catch (IOException e) {
      throw Unavailable.cannot("read " + csv, e);
    }
    if (bytes.length > MAX_BYTES) {
      throw new BadInput(csv + " is larger than 64 MiB; accepted: a trace up to 64 MiB");
    }
    return parse(csv, bytes, column);
  }

  /** The fates in a text of the digits 0 and 1, anything else left out. */
  static LossTrace of(String digits) {
    BitSet lost = new BitSet();
    int packets = 0;
    for (int i = 0; i < digits.length(); i++) {
      char c = digits.charAt(i);
      if (c == '0' || c == '1') {
        lost.set(packets++, c == '1');
      }
    }
    return new LossTrace(
        "text", Manifest.sha256(digits.getBytes(StandardCharsets.UTF_8)), lost, packets);
  }

  private static LossTrace parse(Path csv, byte[] bytes, Optional<String> column) {
    CSVFormat format = CSVFormat.RFC4180.builder().setIgnoreEmptyLines(true).setTrim(true).get();
    try (CSVParser parser =
        CSVParser.builder()
            .setReader(
                new InputStreamReader(
                    new ByteArrayInputStream(bytes), StandardCharsets.UTF_8.newDecoder()))
            .setFormat(format)
            .get()) {
      BitSet lost = new BitSet();
      int packets = 0;
      Iterator<CSVRecord> rows = parser.iterator();
      if (!rows.hasNext()) {
        throw new BadInput(csv + " is empty; accepted: a file of 0 and 1, one a line");
      }
      CSVRecord row = rows.next();
      int at = place(csv, row, column);
      boolean header = column.isPresent() || isName(row.get(at));
      if (!header) {
        lost.set(packets++, fate(csv, parser, row, at));
      }
      while (rows.hasNext()) {
        row = rows.next();
        lost.set(packets++, fate(csv, parser, row, at));
      }
      if (packets == 0) {
        throw new BadInput(csv + " has a header and no fates" + ACCEPTED + ", one a line");
      }
      return new LossTrace(
          String.valueOf(csv.getFileName()), Manifest.sha256(bytes), lost, packets);
    } catch (UncheckedIOException e) {
      throw unparsable(csv, e.getCause() == null ? new IOException(e) : e.getCause());
    } catch (IOException e) {
      throw unparsable(csv, e);
    }
  }

  private static BadInput unparsable(Path csv, Exception e) {
    return new BadInput(
        csv
            + (e instanceof CharacterCodingException ? " is not UTF-8 text" : " is not CSV")
            + "; accepted: a file of 0 and 1, one a line",
        e);
  }

  private static int place(Path csv, CSVRecord first, Optional<String> column) {
    List<String> names = new ArrayList<>(first.toList());
    if (names.get(0).startsWith("\uFEFF")) {
      names.set(0, names.get(0).substring(1));
    }
    if (column.isPresent()) {
      int at = names.indexOf(column.get());
      if (at < 0) {
        throw new BadInput(
            csv
                + ", line 1: no column '"
                + column.get()
                + "'; "
                + Spelling.hint(column.get(), names));
      }
      return at;
    }
    if (names.size() > 1) {
      throw new BadInput(
          csv
              + ", line 1: "
              + names.size()
              + " columns; accepted: one, or --column with one of: "
              + String.join(", ", names));
    }
    return 0;
  }

  /** A heading begins with a letter; a number does not, and so is taken for a fate. */
  private static boolean isName(String text) {
    String start = text.startsWith("\uFEFF") ? text.substring(1) : text;
    return !start.isEmpty() && Character.isLetter(start.charAt(0));
  }

  private static boolean fate(Path csv, CSVParser parser, CSVRecord row, int at) {
    String found = at < row.size() ? row.get(at) : "";
    String text = found.startsWith("\uFEFF") ? found.substring(1) : found;
    if (!text.equals("0") && !text.equals("1")) {
      String shown = text.length() > MAX_SHOWN ? text.substring(0, MAX_SHOWN) + "..." : text;
      throw new BadInput(
          csv + ", line " + parser.getCurrentLineNumber() + ": '" + shown + "'" + ACCEPTED);
    }
    return text.equals("1");
  }

  /** The file's name without its folder. */
  public String name() {
    return name;
  }

  /** SHA-256 of the file, in lower-case hexadecimal digits. */
  public String sha256() {
    return sha256;
  }

  /** Number of packets. */
  public int packets() {
    return packets;
  }

  /** Number of packets lost. */
  public int losses() {
    return lost.cardinality();
  }

  /** Share of the packets lost, 0 to 1. */
  public double lossRatio() {
    return (double) losses() / packets;
  }

  /** Whether a packet was lost, by its place from 0. */
  public boolean lost(int packet) {
    return lost.get(packet);
  }

  /**
   * Lengths of the runs of packets that met the same fate, in order.
   *
   * @param ofLosses whether runs of losses are wanted, or else of deliveries
   * @param complete whether the first and the last run of the trace, which may have been cut, are
   *     left out
   */
  public List<Integer> runs(boolean ofLosses, boolean complete) {
    List<Integer> runs = new ArrayList<>();
    int start = 0;
    while (start < packets) {
      boolean lossRun = lost.get(start);
      int end = Math.min(packets, lossRun ? lost.nextClearBit(start) : nextLoss(start));
      boolean cut = start == 0 || end == packets;
      if (lossRun == ofLosses && !(complete && cut)) {
        runs.add(end - start);
      }
      start = end;
    }
    return runs;
  }

  /**
   * Burst ratio (McGowan 2005, "Burst ratio: a measure of bursty loss on packet-based networks"):
   * the mean run of losses over that of independent losses at the same rate, 1/(1-q). Above 1:
   * losses come in bursts. NaN where nothing or everything is lost.
   */
  public double burstRatio() {
    double runs = runs(true, false).size();
    return losses() == packets ? Double.NaN : losses() / runs * (1 - lossRatio());
  }

  /** How often {@code from} was followed by {@code to}, 1 for lost. */
  int transitions(int from, int to) {
    int count = 0;
    for (int i = 1; i < packets; i++) {
      if (lost.get(i - 1) == (from == 1) && lost.get(i) == (to == 1)) {
        count++;
      }
    }
    return count;
  }

  private int nextLoss(int from) {
    int next = lost.nextSetBit(from);
    return next < 0 ? packets : next;
  }
}
