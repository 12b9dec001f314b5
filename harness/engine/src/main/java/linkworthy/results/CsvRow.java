package linkworthy.results;

import java.nio.file.Path;
import java.util.List;
import java.util.regex.Pattern;
import linkworthy.input.BadInput;
import org.apache.commons.csv.CSVRecord;

/** A row of a table as it is read; every complaint has file, line and column. */
final class CsvRow {
  /** Written where the evidence is too thin for a number. */
  static final String NO_EVIDENCE = "n/a";

  static final long MAX_WHOLE = 999_999_999_999_999_999L;

  private static final Pattern NUMBER = Pattern.compile("-?\\d+\\.\\d+(E-?\\d+)?");
  private static final Pattern WHOLE = Pattern.compile("-?\\d{1,18}");

  private final Path file;
  private final long line;
  private final List<String> names;
  private final CSVRecord record;

  CsvRow(Path file, long line, List<String> names, CSVRecord record) {
    this.file = file;
    this.line = line;
    this.names = names;
    this.record = record;
  }

  void requireHeader() {
    if (!record.toList().equals(names)) {
      throw new BadInput(
          file
              + ", line 1: the columns are '"
              + String.join(",", record.toList())
              + "'; accepted: "
              + String.join(",", names));
    }
  }

  void requireComplete() {
    if (record.size() != names.size()) {
      throw new BadInput(
          where() + "the row has " + record.size() + " fields; accepted: " + names.size());
    }
  }

  String words(String column) {
    return record.get(names.indexOf(column));
  }

  /** A number; NaN where the field is empty or says {@code n/a}. */
  double number(String column) {
    String text = words(column);
    return switch (text) {
      case "", NO_EVIDENCE -> Double.NaN;
      case "inf" -> Double.POSITIVE_INFINITY;
      case "-inf" -> Double.NEGATIVE_INFINITY;
      default -> {
        if (!NUMBER.matcher(text).matches()) {
          throw bad(column, "a number such as 30.0, inf, n/a or nothing");
        }
        yield Double.parseDouble(text);
      }
    };
  }

  long whole(String column, long min, long max) {
    String text = words(column);
    if (WHOLE.matcher(text).matches()) {
      long value = Long.parseLong(text);
      if (value >= min && value <= max) {
        return value;
      }
    }
    throw bad(column, "a whole number from " + min + " to " + max);
  }

  int count(String column) {
    return (int) whole(column, 0, Integer.MAX_VALUE);
  }

  /** Components in force, or -1 where the field is empty. */
  int keep(String column) {
    return words(column).isEmpty() ? -1 : count(column);
  }

  boolean flag(String column) {
    return oneOf(column, List.of(false, true));
  }

  /** The value whose {@code toString} is in the field. */
  <V> V oneOf(String column, List<V> values) {
    String text = words(column);
    return values.stream()
        .filter(value -> String.valueOf(value).equals(text))
        .findFirst()
        .orElseThrow(
            () -> bad(column, String.join(", ", values.stream().map(String::valueOf).toList())));
  }

  BadInput bad(String complaint, Throwable cause) {
    return new BadInput(where() + complaint, cause);
  }

  private BadInput bad(String column, String accepted) {
    return new BadInput(where() + column + " is '" + words(column) + "'; accepted: " + accepted);
  }

  private String where() {
    return file + ", line " + line + ": ";
  }
}
