package linkworthy.results;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import linkworthy.input.BadInput;
import org.jspecify.annotations.Nullable;

/**
 * What a stopped run left of a growing table: the whole work units that it begins with. A unit at
 * the end that lacks a line, or has one that is not as the program writes it, is no part of them;
 * the same anywhere before the end is damage that no stop explains.
 *
 * @param units how many
 * @param bytes length of the header and of these units; 0 if not even the header is whole
 */
record WholeUnits(int units, long bytes) {
  private static final WholeUnits NOTHING = new WholeUnits(0, 0);

  /** Looks at the rows of one whole unit. */
  interface Taker<T> {
    /**
     * @param line number of the unit's first line in the file, from 1
     * @throws BadInput if these are not the rows of that unit
     */
    void accept(int unit, List<T> rows, long line);
  }

  /**
   * @param rowsOfUnit rows of each unit
   * @param most units to look for
   * @throws BadInput if there is a table with other columns, or damage before the last unit
   * @throws linkworthy.input.Unavailable if the file cannot be read
   */
  static <T> WholeUnits of(CsvTable<T> table, Path file, int rowsOfUnit, int most, Taker<T> taker) {
    if (!Files.exists(file)) {
      return NOTHING;
    }
    try (LineInput lines = new LineInput(file)) {
      byte[] header = table.header().getBytes(StandardCharsets.UTF_8);
      byte[] found = lines.next();
      if (found == null && Arrays.mismatch(header, lines.rest()) == lines.rest().length) {
        return NOTHING;
      }
      if (!Arrays.equals(header, found)) {
        throw new BadInput(file + ", line 1: other columns than the study gives; accepted: those");
      }
      WholeUnits whole = new WholeUnits(0, header.length);
      WholeUnits next = whole;
      while (next != null && next.units < most) {
        whole = next;
        next = whole.andOne(table, file, lines, rowsOfUnit, taker);
      }
      return next == null ? whole : next;
    } catch (IOException e) {
      throw FolderFiles.unavailable("read", file, e);
    }
  }

  private <T> @Nullable WholeUnits andOne(
      CsvTable<T> table, Path file, LineInput lines, int rowsOfUnit, Taker<T> taker)
      throws IOException {
    List<T> rows = new ArrayList<>();
    long first = 2 + (long) units * rowsOfUnit;
    long end = bytes;
    BadInput damage = null;
    for (int i = 0; i < rowsOfUnit; i++) {
      byte[] line = lines.next();
      if (line == null) {
        return null;
      }
      end += line.length;
      try {
        rows.add(table.row(file, first + i, line));
      } catch (BadInput e) {
        damage = damage == null ? e : damage;
      }
    }
    if (damage != null) {
      if (lines.next() == null) {
        return null;
      }
      throw damage;
    }
    taker.accept(units, rows, first);
    return new WholeUnits(units + 1, end);
  }
}
