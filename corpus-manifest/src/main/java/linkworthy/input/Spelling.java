package linkworthy.input;

import java.util.Collection;
import java.util.Comparator;
import java.util.Optional;

/** Finds what the user may have meant. */
public final class Spelling {
  private Spelling() {}

  /**
   * The accepted word nearest to what was found, if any is near enough: at most a third of its
   * letters differ by insertion, removal, replacement or a swap of neighbours (restricted
   * Damerau-Levenshtein distance).
   */
  public static Optional<String> nearest(String found, Collection<String> accepted) {
    return accepted.stream()
        .filter(word -> distance(found, word) <= Math.max(1, (word.length() + 1) / 3))
        .min(
            Comparator.comparingInt((String word) -> distance(found, word))
                .thenComparing(Comparator.naturalOrder()));
  }

  /** A clause for an error message: the nearest spelling, then all that is accepted. */
  public static String hint(String found, Collection<String> accepted) {
    String all = "accepted: " + String.join(", ", accepted);
    return nearest(found, accepted).map(w -> "did you mean '" + w + "'? " + all).orElse(all);
  }

  private static int distance(String a, String b) {
    int[][] d = new int[a.length() + 1][b.length() + 1];
    for (int i = 0; i <= a.length(); i++) {
      for (int j = 0; j <= b.length(); j++) {
        if (i == 0 || j == 0) {
          d[i][j] = i + j;
          continue;
        }
        int change = a.charAt(i - 1) == b.charAt(j - 1) ? 0 : 1;
        d[i][j] = Math.min(Math.min(d[i - 1][j], d[i][j - 1]) + 1, d[i - 1][j - 1] + change);
        if (i > 1
            && j > 1
            && a.charAt(i - 1) == b.charAt(j - 2)
            && a.charAt(i - 2) == b.charAt(j - 1)) {
          d[i][j] = Math.min(d[i][j], d[i - 2][j - 2] + 1);
        }
      }
    }
    return d[a.length()][b.length()];
  }
}
