package linkworthy.link;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.BitSet;
import java.util.List;
import java.util.stream.IntStream;
import linkworthy.input.Require;
import org.jspecify.annotations.Nullable;

/**
 * A systematic Reed-Solomon code over 256 elements (Reed and Solomon 1960, "Polynomial codes over
 * certain finite fields"). The generator polynomial has the roots a^b, ..., a^(b+r-1) for r parity
 * symbols; a code word, first data symbol at the highest power, is a multiple of it. Any k of the k
 * + r symbols give back the k data symbols; e wrong symbols and f missing ones are set right where
 * 2e + f is at most r.
 *
 * <p>A symbol is a row of bytes, and byte i of all rows forms a code word of its own, so one object
 * codes whole packets. Codes may be shortened: fewer data symbols stand for leading zeros. An
 * object does not change and may be used by several threads.
 */
public final class ReedSolomon {
  private final GaloisField field;
  private final int firstRoot;
  private final int[] generator;

  /** What a data symbol adds to each parity symbol, by its distance from the last data symbol. */
  private final int[][] shares;

  /**
   * The code over 0x11D with the roots a^0 to a^(r-1).
   *
   * @param parity number of parity symbols r, 1 to 254
   */
  public ReedSolomon(int parity) {
    this(GaloisField.X11D, 0, parity);
  }

  /**
   * @param firstRoot exponent b of the first root, from 0
   */
  ReedSolomon(GaloisField field, int firstRoot, int parity) {
    Require.inRange(parity, 1, GaloisField.ORDER - 1, "parity symbols");
    Require.inRange(firstRoot, 0, GaloisField.ORDER, "first root");
    this.field = field;
    this.firstRoot = firstRoot;
    this.generator = generator(field, firstRoot, parity);
    this.shares = shares(field, generator);
  }

  /** The product of (x - root), highest power first. */
  private static int[] generator(GaloisField field, int firstRoot, int parity) {
    int[] product = {1};
    for (int i = 0; i < parity; i++) {
      int root = field.power(firstRoot + i);
      int[] next = new int[product.length + 1];
      for (int j = 0; j < product.length; j++) {
        next[j] ^= product[j];
        next[j + 1] ^= field.product(product[j], root);
      }
      product = next;
    }
    return product;
  }

  /** Row i holds x^(r+i) modulo the generator, highest power first. */
  private static int[][] shares(GaloisField field, int[] generator) {
    int parity = generator.length - 1;
    int[][] rows = new int[GaloisField.ORDER - parity][parity];
    System.arraycopy(generator, 1, rows[0], 0, parity);
    for (int i = 1; i < rows.length; i++) {
      int carried = rows[i - 1][0];
      for (int j = 0; j < parity; j++) {
        int shifted = j + 1 < parity ? rows[i - 1][j + 1] : 0;
        rows[i][j] = shifted ^ field.product(carried, generator[j + 1]);
      }
    }
    return rows;
  }

  /** Coefficients of the generator polynomial, highest power first. */
  int[] generator() {
    return generator.clone();
  }

  /** Number of parity symbols. */
  public int parity() {
    return generator.length - 1;
  }

  /** Largest number of data symbols. */
  public int maxData() {
    return shares.length;
  }

  /**
   * The parity symbols of a code word.
   *
   * @param data 1 to {@link #maxData()} rows of one length
   * @throws IllegalArgumentException if there are more or fewer
   */
  public byte[][] encode(byte[][] data) {
    requireData(data.length);
    byte[][] parity = new byte[parity()][];
    for (int j = 0; j < parity.length; j++) {
      parity[j] = new byte[data[0].length];
      for (int i = 0; i < data.length; i++) {
        field.addMultiple(parity[j], data[i], share(data.length, i, j));
      }
    }
    return parity;
  }

  private void requireData(int count) {
    Require.inRange(count, 1, maxData(), "data symbols");
  }

  /** What data symbol i of {@code count} adds to parity symbol j. */
  private int share(int count, int i, int j) {
    return shares[count - 1 - i][j];
  }

  /**
   * Fills in the erased data symbols, which are null, from the others and from the parity symbols
   * that are there: as many of them, the first ones, as data symbols are missing. Symbols present
   * are taken to be right.
   *
   * @param data 1 to {@link #maxData()} rows, filled in place
   * @param parity {@link #parity()} rows, null where erased
   * @return false, and nothing is changed, if fewer parity symbols are there than data symbols are
   *     missing
   * @throws IllegalArgumentException if the number of rows is another or rows differ in length
   */
  public boolean restore(byte[] @Nullable [] data, byte[] @Nullable [] parity) {
    requireRows(data, parity);
    List<Integer> missing = new ArrayList<>();
    for (int i = 0; i < data.length; i++) {
      if (data[i] == null) {
        missing.add(i);
      }
    }
    int size = missing.size();
    int[][] matrix = new int[size][size];
    byte[][] sides = new byte[size][];
    int used = 0;
    for (int j = 0; j < parity.length && used < size; j++) {
      byte[] row = parity[j];
      if (row != null) {
        for (int c = 0; c < size; c++) {
          matrix[used][c] = share(data.length, missing.get(c), j);
        }
        sides[used++] = withoutKnown(row, data, j);
      }
    }
    if (used < size) {
      return false;
    }
    solve(matrix, sides);
    for (int c = 0; c < size; c++) {
      data[missing.get(c)] = sides[c];
    }
    return true;
  }

  /**
   * Sets wrong data symbols right and fills in the erased ones, which are null. Byte i of all rows
   * is a word of its own: it is decoded if a code word differs from it in e places besides the f
   * erased ones, with 2e + f at most {@link #parity()}. A word with more wrong symbols is either
   * found to be beyond that, or taken for another code word: with t = (r - f)/2, rounded down, and
   * n symbols, that happens to a random word with a probability of at most the sum over s = 0 to t
   * of C(n-f, s) 255^s / 256^(r-f) (McEliece and Swanson, IEEE Transactions on Information Theory
   * 32(5), 1986, from memory); with f = r, to all.
   *
   * @param data 1 to {@link #maxData()} rows, changed in place
   * @param parity {@link #parity()} rows, null where erased
   * @return the bytes at which no code word is near enough; data symbols that came are left there
   *     as they came, and erased ones are 0. With more than {@link #parity()} symbols erased these
   *     are all bytes, and nothing is changed
   * @throws IllegalArgumentException if the number of rows is another or rows differ in length
   */
  public BitSet correct(byte[] @Nullable [] data, byte[] @Nullable [] parity) {
    int width = requireRows(data, parity);
    int length = data.length + parity.length;
    byte[] @Nullable [] word = Arrays.copyOf(data, length);
    System.arraycopy(parity, 0, word, data.length, parity.length);
    int[] erased = IntStream.range(0, length).filter(i -> word[i] == null).toArray();
    BitSet beyond = new BitSet();
    if (erased.length > parity.length) {
      beyond.set(0, width);
      return beyond;
    }
    byte[][] syndromes = syndromes(word, width);
    byte[][] rows = new byte[data.length][];
    for (int i = 0; i < rows.length; i++) {
      byte[] row = data[i];
      rows[i] = row == null ? new byte[width] : row;
    }
    System.arraycopy(rows, 0, data, 0, rows.length);
    Errata errata = new Errata(field, firstRoot, parity.length, length, erased);
    int[] syndrome = new int[parity.length];
    for (int at = 0; at < width; at++) {
      if (column(syndromes, at, syndrome)) {
        int[] changes = errata.of(syndrome);
        beyond.set(at, changes == null);
        for (int i = 0; changes != null && i < rows.length; i++) {
          rows[i][at] ^= (byte) changes[i];
        }
      }
    }
    return beyond;
  }

  /** Copies a column; whether anything in it is not 0. */
  private static boolean column(byte[][] rows, int at, int[] column) {
    int any = 0;
    for (int j = 0; j < column.length; j++) {
      column[j] = rows[j][at] & 0xFF;
      any |= column[j];
    }
    return any != 0;
  }

  /** Row j holds what each word, as a polynomial, is at root j. */
  private byte[][] syndromes(byte[] @Nullable [] word, int width) {
    byte[][] syndromes = new byte[parity()][width];
    for (int i = 0; i < word.length; i++) {
      byte[] row = word[i];
      if (row != null) {
        for (int j = 0; j < syndromes.length; j++) {
          field.addMultiple(
              syndromes[j], row, field.power((firstRoot + j) * (word.length - 1 - i)));
        }
      }
    }
    return syndromes;
  }

  /** The length of all rows. */
  private int requireRows(byte[] @Nullable [] data, byte[] @Nullable [] parity) {
    requireData(data.length);
    Require.inRange(parity.length, parity(), parity(), "rows of parity");
    int length = -1;
    for (byte[] @Nullable [] rows : List.of(data, parity)) {
      for (byte[] row : rows) {
        if (row != null) {
          length = length < 0 ? row.length : length;
          Require.inRange(row.length, length, length, "length of a symbol (bytes)");
        }
      }
    }
    return Math.max(0, length);
  }

  /** A parity symbol less what the known data symbols added to it. */
  private byte[] withoutKnown(byte[] parity, byte[] @Nullable [] data, int j) {
    byte[] rest = parity.clone();
    for (int i = 0; i < data.length; i++) {
      byte[] known = data[i];
      if (known != null) {
        field.addMultiple(rest, known, share(data.length, i, j));
      }
    }
    return rest;
  }

  /**
   * Gauss-Jordan elimination; the solution replaces the right-hand sides. Every square part of the
   * shares is invertible, because any k symbols of the code determine the word.
   */
  private void solve(int[][] matrix, byte[][] sides) {
    for (int column = 0; column < matrix.length; column++) {
      int pivot = column;
      while (matrix[pivot][column] == 0) {
        pivot++;
      }
      swap(matrix, column, pivot);
      swap(sides, column, pivot);
      int factor = field.inverse(matrix[column][column]);
      field.scale(sides[column], factor);
      for (int c = 0; c < matrix.length; c++) {
        matrix[column][c] = field.product(matrix[column][c], factor);
      }
      for (int row = 0; row < matrix.length; row++) {
        int weight = matrix[row][column];
        if (row != column && weight != 0) {
          field.addMultiple(sides[row], sides[column], weight);
          for (int c = 0; c < matrix.length; c++) {
            matrix[row][c] ^= field.product(weight, matrix[column][c]);
          }
        }
      }
    }
  }

  private static <T> void swap(T[] rows, int a, int b) {
    T row = rows[a];
    rows[a] = rows[b];
    rows[b] = row;
  }
}
