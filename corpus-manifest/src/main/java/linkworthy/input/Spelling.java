package linkworthy.input;

import java.util.Collection;
import java.util.Comparator;
import java.util.Locale;
import java.util.Optional;
import java.util.stream.Collectors;

/** Finds what the user may have meant. */
public final class Spelling {
  private static final int MAX_LISTED = 60;

  private Spelling() {}

  /**
   * The accepted word nearest to what was found, if any is near enough. Upper and lower case count
   * as equal; insertions, removals, replacements and swaps of neighbours count one each (restricted
   * Damerau-Levenshtein distance). Near enough is a third of the word's letters, rounded, at least
   * one, and fewer than all.
   */
  public static Optional<String> nearest(String found, Collection<String> accepted) {
    String lower = found.toLowerCase(Locale.ROOT);
    return accepted.stream()
        .map(word -> new Candidate(word, distance(lower, word.toLowerCase(Locale.ROOT))))
        .filter(candidate -> candidate.distance <= allowed(candidate.word))
        .min(Comparator.comparingInt(Candidate::distance).thenComparing(Candidate::word))
        .map(Candidate::word);
  }

  /**
   * A clause for an error message: the nearest spelling, then what is accepted (the first {@value
   * #MAX_LISTED} words where there are more).
   */
  public static String hint(String found, Collection<String> accepted) {
    String all =
        "accepted: " + accepted.stream().limit(MAX_LISTED).collect(Collectors.joining(", "));
    if (accepted.size() > MAX_LISTED) {
      all += " and " + (accepted.size() - MAX_LISTED) + " more";
    }
    return nearest(found, accepted).map(w -> "did you mean '" + w + "'? ").orElse("") + all;
  }

  private static int allowed(String word) {
    return Math.min(Math.max(1, (word.length() + 1) / 3), word.length() - 1);
  }

  private record Candidate(String word, int distance) {}

  /** The distance, or where the lengths alone are too far apart, their difference. */
  private static int distance(String a, String b) {
    int lengths = Math.abs(a.length() - b.length());
    if (lengths > allowed(b)) {
      return lengths;
    }
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
