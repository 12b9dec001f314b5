package linkworthy.link;

import org.jspecify.annotations.Nullable;

/**
 * What is wrong with a received word of a Reed-Solomon code, found from its syndromes. The locator
 * of the erased places is extended to one of all wrong places by the algorithm of Berlekamp (1968)
 * and Massey (1969); its roots are found by trying every place (Chien 1964), and what was added
 * there by Forney's formula (1965).
 *
 * <p>Place i of a word of N symbols has the locator X = a^(N-1-i). Syndrome j of wrong values Y is
 * the sum of Y X^(b+j). An object keeps its working memory from word to word and serves one thread.
 */
final class Errata {
  private final GaloisField field;
  private final int firstRoot;
  private final int parity;
  private final int length;
  private final int erased;

  /** The locator of the erased places, lowest power first, and copies to work on. */
  private final int[] erasures;

  private final int[] locator;
  private final int[] previous;
  private final int[] scratch;
  private final int[] evaluator;
  private final int[] changes;

  /**
   * @param length symbols of a word
   * @param erasedPlaces places from 0, at most {@code parity} of them, where symbols are taken as 0
   */
  Errata(GaloisField field, int firstRoot, int parity, int length, int[] erasedPlaces) {
    this.field = field;
    this.firstRoot = firstRoot;
    this.parity = parity;
    this.length = length;
    this.erased = erasedPlaces.length;
    this.erasures = new int[parity + 1];
    erasures[0] = 1;
    for (int place : erasedPlaces) {
      for (int i = parity; i > 0; i--) {
        erasures[i] ^= field.product(erasures[i - 1], field.power(length - 1 - place));
      }
    }
    this.locator = new int[parity + 1];
    this.previous = new int[parity + 1];
    this.scratch = new int[parity + 1];
    this.evaluator = new int[parity];
    this.changes = new int[length];
  }

  /**
   * What to add to each symbol to get the one code word that differs in e places besides the f
   * erased ones, where 2e + f is at most the number of parity symbols; null if there is none. The
   * array is used again for the next word.
   */
  int @Nullable [] of(int[] syndromes) {
    locate(syndromes);
    int degree = parity;
    while (locator[degree] == 0) {
      degree--;
    }
    if (2 * degree - erased > parity) {
      return null;
    }
    for (int i = 0; i < parity; i++) {
      evaluator[i] = coefficient(syndromes, i);
    }
    for (int place = 0; place < length; place++) {
      changes[place] = change(length - 1 - place);
    }
    return explains(syndromes) ? changes : null;
  }

  /** Coefficient i of the product of the locator with the syndromes, lowest power first. */
  private int coefficient(int[] syndromes, int i) {
    int sum = 0;
    for (int j = 0; j <= i; j++) {
      sum ^= field.product(locator[j], syndromes[i - j]);
    }
    return sum;
  }

  private void locate(int[] syndromes) {
    System.arraycopy(erasures, 0, locator, 0, erasures.length);
    System.arraycopy(erasures, 0, previous, 0, erasures.length);
    int span = erased;
    for (int k = erased; k < parity; k++) {
      System.arraycopy(previous, 0, previous, 1, parity);
      previous[0] = 0;
      int discrepancy = coefficient(syndromes, k);
      if (discrepancy == 0) {
        continue;
      }
      System.arraycopy(locator, 0, scratch, 0, scratch.length);
      for (int i = 0; i <= parity; i++) {
        locator[i] ^= field.product(discrepancy, previous[i]);
      }
      if (2 * span <= k + erased) {
        span = k + 1 + erased - span;
        int inverse = field.inverse(discrepancy);
        for (int i = 0; i <= parity; i++) {
          previous[i] = field.product(inverse, scratch[i]);
        }
      }
    }
  }

  /** What to add at the place of a power: Y = X^(1-b) W(1/X) / L'(1/X) where 1/X is a root of L. */
  private int change(int power) {
    int at = field.power(GaloisField.ORDER - power);
    if (value(locator, at, 0, 1) != 0) {
      return 0;
    }
    int slope = value(locator, at, 1, 2);
    int factor = field.power(Math.floorMod(power * (1 - firstRoot), GaloisField.ORDER));
    return slope == 0
        ? 0
        : field.product(field.product(factor, value(evaluator, at, 0, 1)), field.inverse(slope));
  }

  /** Sum of every {@code stride}th coefficient from {@code first} times x^(i - first). */
  private int value(int[] polynomial, int x, int first, int stride) {
    int step = stride == 1 ? x : field.product(x, x);
    int sum = 0;
    int power = 1;
    for (int i = first; i < polynomial.length; i += stride) {
      sum ^= field.product(polynomial[i], power);
      power = field.product(power, step);
    }
    return sum;
  }

  /** Whether the changes have the syndromes of the word, so that with them it is a code word. */
  private boolean explains(int[] syndromes) {
    for (int j = 0; j < parity; j++) {
      int sum = syndromes[j];
      for (int place = 0; place < length; place++) {
        if (changes[place] != 0) {
          sum ^= field.product(changes[place], field.power((firstRoot + j) * (length - 1 - place)));
        }
      }
      if (sum != 0) {
        return false;
      }
    }
    return true;
  }
}
