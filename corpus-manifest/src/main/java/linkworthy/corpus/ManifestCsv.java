package linkworthy.corpus;

import java.io.IOException;
import java.io.StringReader;
import java.io.UncheckedIOException;
import java.nio.ByteBuffer;
import java.nio.charset.CharacterCodingException;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.HashMap;
import java.util.HashSet;
import java.util.Iterator;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.stream.Stream;
import linkworthy.input.BadInput;
import linkworthy.input.Spelling;
import org.apache.commons.csv.CSVFormat;
import org.apache.commons.csv.CSVParser;
import org.apache.commons.csv.CSVPrinter;
import org.apache.commons.csv.CSVRecord;

/** A manifest as CSV text. */
final class ManifestCsv {
  private static final CSVFormat FORMAT =
      CSVFormat.RFC4180.builder().setIgnoreEmptyLines(true).setRecordSeparator("\n").get();

  private static final List<String> KNOWN =
      Stream.concat(Manifest.COLUMNS.stream(), Stream.of(Manifest.ADDRESS)).toList();

  private final String source;
  private final PictureStore store;

  ManifestCsv(String source, PictureStore store) {
    this.source = source;
    this.store = store;
  }

  /**
   * @throws BadInput with file, line and column
   */
  List<ManifestEntry> read(byte[] csv) {
    String text = decode(csv);
    try (CSVParser parser =
        CSVParser.builder().setReader(new StringReader(text)).setFormat(FORMAT).get()) {
      return read(parser);
    } catch (IOException e) {
      throw new BadInput(source + " is not CSV: " + e.getMessage(), e);
    }
  }

  private List<ManifestEntry> read(CSVParser parser) {
    long line = 1;
    try {
      Iterator<CSVRecord> records = parser.iterator();
      if (!records.hasNext()) {
        throw new BadInput(source + " is empty; accepted: a manifest in CSV");
      }
      List<String> columns = columns(records.next());
      List<ManifestEntry> entries = new ArrayList<>();
      Set<String> ids = new HashSet<>();
      while (records.hasNext()) {
        CSVRecord row = records.next();
        line = parser.getCurrentLineNumber() - breaks(row);
        ManifestEntry entry = entry(row, columns, line);
        if (!ids.add(entry.id())) {
          throw at(line, "id is '" + entry.id() + "', which stands twice; accepted: each id once");
        }
        entries.add(entry);
      }
      if (entries.isEmpty()) {
        throw new BadInput(source + " lists no picture");
      }
      return List.copyOf(entries);
    } catch (UncheckedIOException e) {
      throw at(line + 1, "is not CSV: " + e.getMessage());
    }
  }

  /** How many lines a row has behind its first. */
  private static long breaks(CSVRecord row) {
    return row.stream()
        .mapToLong(value -> value.lines().count())
        .map(n -> Math.max(0, n - 1))
        .sum();
  }

  private String decode(byte[] csv) {
    try {
      String text = StandardCharsets.UTF_8.newDecoder().decode(ByteBuffer.wrap(csv)).toString();
      return text.startsWith("\uFEFF") ? text.substring(1) : text;
    } catch (CharacterCodingException e) {
      throw new BadInput(source + " is not UTF-8 text; accepted: a manifest in CSV", e);
    }
  }

  private List<String> columns(CSVRecord header) {
    List<String> columns = header.toList();
    for (String column : columns) {
      if (!KNOWN.contains(column)) {
        throw at(1, "unknown column '" + column + "'; " + Spelling.hint(column, KNOWN));
      }
    }
    for (String needed : Manifest.COLUMNS) {
      if (!columns.contains(needed)) {
        throw at(1, "missing column '" + needed + "'");
      }
    }
    if (columns.size() > Set.copyOf(columns).size()) {
      throw at(1, "a column stands twice; accepted: each once");
    }
    return columns;
  }

  private ManifestEntry entry(CSVRecord row, List<String> columns, long line) {
    if (row.size() != columns.size()) {
      throw at(line, row.size() + " values; accepted: " + columns.size() + ", one for each column");
    }
    Map<String, String> values = new HashMap<>();
    for (int i = 0; i < columns.size(); i++) {
      values.put(columns.get(i), row.get(i));
    }
    try {
      ManifestEntry entry = entry(values);
      store.requireInside(entry.file());
      return entry;
    } catch (IllegalArgumentException | BadInput e) {
      throw at(line, String.valueOf(e.getMessage()));
    }
  }

  private static ManifestEntry entry(Map<String, String> values) {
    return new ManifestEntry(
        text(values, "id"),
        text(values, "set"),
        text(values, "file"),
        number(values, "width"),
        number(values, "height"),
        number(values, "channels"),
        number(values, "bit_depth"),
        text(values, "category"),
        text(values, "licence"),
        text(values, "attribution"),
        text(values, "source"),
        text(values, "sha256"),
        text(values, "derivation"),
        text(values, Manifest.ADDRESS));
  }

  private static String text(Map<String, String> values, String column) {
    return values.getOrDefault(column, "");
  }

  private static int number(Map<String, String> values, String column) {
    String text = text(values, column);
    if (!text.matches("[0-9]{1,9}")) {
      throw new IllegalArgumentException(
          column
              + " is '"
              + (text.length() > 40 ? text.substring(0, 37) + "..." : text)
              + "'; accepted: a whole number");
    }
    return Integer.parseInt(text);
  }

  private BadInput at(long line, String problem) {
    return new BadInput(source + ", line " + line + ": " + problem);
  }

  static String write(List<ManifestEntry> entries) {
    boolean addresses = entries.stream().anyMatch(entry -> !entry.address().isEmpty());
    StringBuilder out = new StringBuilder();
    try (CSVPrinter printer = new CSVPrinter(out, FORMAT)) {
      printer.printRecord(addresses ? KNOWN : Manifest.COLUMNS);
      for (ManifestEntry entry : entries) {
        List<Object> values = new ArrayList<>(values(entry));
        if (addresses) {
          values.add(entry.address());
        }
        printer.printRecord(values);
      }
    } catch (IOException e) {
      throw new IllegalStateException("a string cannot fail to be written", e);
    }
    return out.toString();
  }

  private static List<Object> values(ManifestEntry e) {
    return List.of(
        e.id(),
        e.set(),
        e.file(),
        e.width(),
        e.height(),
        e.channels(),
        e.bitDepth(),
        e.category(),
        e.licence(),
        e.attribution(),
        e.source(),
        e.sha256(),
        e.derivation());
  }
}
