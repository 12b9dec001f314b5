package linkworthy.results;

import java.nio.file.Path;
import java.util.HashSet;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.regex.Pattern;
import linkworthy.input.BadInput;
import org.apache.commons.csv.CSVRecord;
import org.jspecify.annotations.Nullable;

/** A row of a table as it is read; every complaint has file, line and column. */
final class CsvRow {
  /** Written where the evidence is too thin for a number. */
  static final String NO_EVIDENCE = "n/a";

  static final long MAX_WHOLE = 999_999_999_999_999_999L;

  private static final Pattern NUMBER = Pattern.compile("-?\\d+\\.\\d+(E-?\\d+)?");
  private static final Pattern NAME = Pattern.compile("[a-z][a-z0-9_]*");
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

  /**
   * The names of the columns, if this row is the header: the fixed ones, then any further ones.
   *
   * @param suffix with which the names of further columns end; null if none are accepted
   */
  List<String> header(@Nullable String suffix) {
    List<String> found = record.toList();
    boolean fixed = found.size() >= names.size() && found.subList(0, names.size()).equals(names);
    boolean further =
        found.stream()
            .skip(names.size())
            .allMatch(
                name -> suffix != null && NAME.matcher(name).matches() && name.endsWith(suffix));
    if (!fixed || !further || new HashSet<>(found).size() < found.size()) {
      throw new BadInput(
          file
              + ", line 1: the columns are '"
              + String.join(",", found)
              + "'; accepted: "
              + String.join(",", names)
              + (suffix == null ? "" : ", then one for each further measure, each once"));
    }
    return found;
  }

  /** The numbers behind the fixed columns, by the column's name without its suffix. */
  Map<String, Double> further(int fixed, String suffix) {
    Map<String, Double> numbers = new LinkedHashMap<>();
    for (String column : names.subList(fixed, names.size())) {
      numbers.put(column.substring(0, column.length() - suffix.length()), number(column));
    }
    return numbers;
  }

  void requireComplete() {
    if (record.size() != names.size()) {
      throw new BadInput(
          where() + "the row has " + record.size() + " fields; accepted: " + names.size());
    }
  }

  /** A text, as it was before {@link CsvTable#harmless}. */
  String words(String column) {
    return CsvTable.original(field(column));
  }

  private String field(String column) {
    return record.get(names.indexOf(column));
  }

  /** A number; NaN where the field is empty or says {@code n/a}. */
  double number(String column) {
    String text = field(column);
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
    String text = field(column);
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
