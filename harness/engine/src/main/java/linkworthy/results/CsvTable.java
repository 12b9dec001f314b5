package linkworthy.results;

import java.io.BufferedReader;
import java.io.IOException;
import java.io.StringReader;
import java.io.UncheckedIOException;
import java.nio.ByteBuffer;
import java.nio.channels.FileChannel;
import java.nio.charset.CharacterCodingException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.NoSuchFileException;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.Collection;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Objects;
import java.util.function.Consumer;
import java.util.function.Function;
import java.util.regex.Pattern;
import linkworthy.input.BadInput;
import linkworthy.input.Decimal;
import org.apache.commons.csv.CSVException;
import org.apache.commons.csv.CSVFormat;
import org.apache.commons.csv.CSVParser;
import org.apache.commons.csv.CSVRecord;
import org.jspecify.annotations.Nullable;

/**
 * A CSV file with fixed columns, and in an open table further ones behind them, one row for each
 * value: RFC 4180 in UTF-8, except that lines end in LF alone, as all text files of the project do.
 * Numbers are in the form of {@link Decimal#shortest}; infinity is {@code inf} and NaN an empty
 * field, or {@code n/a} in a column that says so.
 */
final class CsvTable<T> {
  private static final String INFINITE = "inf";
  private static final Pattern FORMULA = Pattern.compile("'*[=+\\-@\t\r]");
  private static final CSVFormat FORMAT =
      CSVFormat.RFC4180.builder().setRecordSeparator("\n").get();

  private final List<Column<T>> columns;
  private final List<String> names;
  private final @Nullable Further<T> further;
  private final Function<CsvRow, T> maker;

  /** A column: its name and what a row has there. */
  record Column<T>(String name, Function<T, String> text) {}

  /**
   * Numbers behind the fixed columns; which there are differs from file to file.
   *
   * @param values a row's numbers by name
   * @param suffix what the column has behind the name
   */
  record Further<T>(Function<T, Map<String, Double>> values, String suffix) {}

  /** A table whose rows are made of the fields by {@code maker}. */
  CsvTable(List<Column<T>> columns, Function<CsvRow, T> maker) {
    this(columns, null, maker);
  }

  /** An open table. */
  CsvTable(List<Column<T>> columns, @Nullable Further<T> further, Function<CsvRow, T> maker) {
    this.columns = List.copyOf(columns);
    this.names = columns.stream().map(Column::name).toList();
    this.further = further;
    this.maker = maker;
  }

  /** This open table for writing, with columns for the further numbers of these names. */
  CsvTable<T> with(Collection<String> furtherNames) {
    Further<T> numbers = Objects.requireNonNull(further);
    List<Column<T>> all = new ArrayList<>(columns);
    for (String name : furtherNames) {
      all.add(
          number(
              name + numbers.suffix(),
              row -> numbers.values().apply(row).getOrDefault(name, Double.NaN)));
    }
    return new CsvTable<>(all, maker);
  }

  /**
   * The text of a file of these rows; in an open table the first row says what further columns
   * there are.
   */
  String text(List<T> rows) {
    CsvTable<T> table =
        further == null
            ? this
            : with(rows.isEmpty() ? List.of() : further.values().apply(rows.get(0)).keySet());
    return table.header() + table.lines(rows);
  }

  /** A column of text; see {@link #harmless}. */
  static <T> Column<T> words(String name, Function<T, String> value) {
    return new Column<>(name, row -> harmless(value.apply(row)));
  }

  /**
   * Text that no spreadsheet takes for a formula: where it begins with {@code =}, {@code +}, {@code
   * -}, {@code @}, a tab or a carriage return, whatever number of apostrophes before that, one more
   * apostrophe is put in front.
   */
  static String harmless(String text) {
    return FORMULA.matcher(text).lookingAt() ? "'" + text : text;
  }

  /** The text that {@link #harmless} made this of. */
  static String original(String field) {
    return field.startsWith("'") && FORMULA.matcher(field).lookingAt() ? field.substring(1) : field;
  }

  static <T> Column<T> whole(String name, Function<T, Number> value) {
    return new Column<>(name, row -> Long.toString(value.apply(row).longValue()));
  }

  /** A column of numbers; NaN is an empty field. */
  static <T> Column<T> number(String name, Function<T, Double> value) {
    return new Column<>(name, row -> number(value.apply(row), ""));
  }

  /** A column of numbers for which there may be too little evidence; NaN is {@code n/a}. */
  static <T> Column<T> evidence(String name, Function<T, Double> value) {
    return new Column<>(name, row -> number(value.apply(row), CsvRow.NO_EVIDENCE));
  }

  private static String number(double value, String forNan) {
    if (Double.isNaN(value)) {
      return forNan;
    }
    if (Double.isInfinite(value)) {
      return value > 0 ? INFINITE : "-" + INFINITE;
    }
    return Decimal.shortest(value);
  }

  List<String> names() {
    return names;
  }

  /** The header line. */
  String header() {
    return line(names);
  }

  /** What a row has in each column, by its name, in order. */
  Map<String, String> fields(T row) {
    Map<String, String> fields = new LinkedHashMap<>();
    columns.forEach(column -> fields.put(column.name(), column.text().apply(row)));
    return fields;
  }

  /** The lines of these rows. */
  String lines(List<T> rows) {
    StringBuilder text = new StringBuilder();
    for (T row : rows) {
      text.append(line(columns.stream().map(column -> column.text().apply(row)).toList()));
    }
    return text.toString();
  }

  private static String line(List<String> fields) {
    return FORMAT.format(fields.toArray()) + "\n";
  }

  /**
   * Reads a file row by row.
   *
   * @return the number of rows
   * @throws BadInput if it is missing, has other columns or a row that is none
   * @throws linkworthy.input.Unavailable if it cannot be read
   */
  long read(Path file, Consumer<? super T> each) {
    requireWholeLines(file);
    try (BufferedReader reader = Files.newBufferedReader(file, StandardCharsets.UTF_8);
        CSVParser parser = FORMAT.parse(reader)) {
      long rows = -1;
      List<String> found = names;
      for (CSVRecord record : parser) {
        CsvRow row = new CsvRow(file, parser.getCurrentLineNumber(), found, record);
        if (rows < 0) {
          found = row.header(further == null ? null : further.suffix());
        } else {
          row.requireComplete();
          each.accept(make(row));
        }
        rows++;
      }
      return rows;
    } catch (UncheckedIOException | IOException e) {
      throw unreadable(file, e);
    }
  }

  /**
   * All rows of a file.
   *
   * @throws BadInput if it is missing, has other columns or a row that is none
   * @throws linkworthy.input.Unavailable if it cannot be read
   */
  List<T> read(Path file) {
    List<T> rows = new ArrayList<>();
    long unused = read(file, rows::add);
    return rows;
  }

  /**
   * The row that a line of a file is. The line must have the very bytes that this table writes for
   * the row.
   *
   * @throws BadInput if it is none
   */
  T row(Path file, long number, byte[] line) {
    T made = trustedRow(file, number, line);
    if (Arrays.equals(lines(List.of(made)).getBytes(StandardCharsets.UTF_8), line)) {
      return made;
    }
    throw notAsWritten(file, number, null);
  }

  /**
   * The row that a line is whose very bytes are known to be as written.
   *
   * @throws BadInput if it is none
   */
  T trustedRow(Path file, long number, byte[] line) {
    String text = new String(line, StandardCharsets.UTF_8);
    try (CSVParser parser = FORMAT.parse(new StringReader(text))) {
      List<CSVRecord> records = parser.getRecords();
      if (records.size() == 1) {
        CsvRow row = new CsvRow(file, number, names, records.get(0));
        row.requireComplete();
        return make(row);
      }
    } catch (UncheckedIOException | IOException e) {
      throw notAsWritten(file, number, e);
    }
    throw notAsWritten(file, number, null);
  }

  private static BadInput notAsWritten(Path file, long number, @Nullable Throwable cause) {
    String complaint =
        file + ", line " + number + " is damaged; accepted: a row as the program writes it";
    return cause == null ? new BadInput(complaint) : new BadInput(complaint, cause);
  }

  private T make(CsvRow row) {
    try {
      return maker.apply(row);
    } catch (IllegalArgumentException e) {
      throw row.bad(String.valueOf(e.getMessage()), e);
    }
  }

  /** A file that was cut off inside a row must not pass for a shorter one. */
  private static void requireWholeLines(Path file) {
    try (FileChannel channel = FileChannel.open(file)) {
      ByteBuffer last = ByteBuffer.allocate(1);
      if (channel.size() > 0 && channel.read(last, channel.size() - 1) == 1) {
        if (last.get(0) == '\n') {
          return;
        }
        throw new BadInput(
            file + " ends inside a line; accepted: whole lines (was its run killed?)");
      }
      throw new BadInput(file + " is empty; accepted: a table with a header");
    } catch (IOException e) {
      throw unreadable(file, e);
    }
  }

  private static RuntimeException unreadable(Path file, Exception e) {
    Throwable cause = e instanceof UncheckedIOException && e.getCause() != null ? e.getCause() : e;
    if (cause instanceof NoSuchFileException) {
      return new BadInput(file + " does not exist", e);
    }
    if (cause instanceof CharacterCodingException) {
      return new BadInput(file + " is not UTF-8 text; accepted: a table in UTF-8", e);
    }
    if (cause instanceof CSVException) {
      return new BadInput(file + " is no table: " + cause.getMessage(), e);
    }
    return FolderFiles.unavailable("read", file, (IOException) cause);
  }
}
