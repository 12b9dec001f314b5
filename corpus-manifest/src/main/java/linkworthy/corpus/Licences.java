package linkworthy.corpus;

import java.util.List;
import linkworthy.input.Spelling;

/**
 * The licences under which a picture may be listed: those that let anybody use, change and pass on
 * the picture, commercially too, with no more than a credit or the same licence in return. Names
 * are identifiers of the SPDX License List; {@code LicenseRef-public-domain} stands for pictures
 * without copyright and {@code LicenseRef-own-work} for pictures that the manifest's owner took.
 * Non-commercial and no-derivatives licences are left out on purpose.
 */
public final class Licences {
  private static final List<String> OPEN =
      List.of(
          "0BSD",
          "Apache-2.0",
          "BSD-2-Clause",
          "BSD-3-Clause",
          "CC-BY-2.0",
          "CC-BY-2.5",
          "CC-BY-3.0",
          "CC-BY-4.0",
          "CC-BY-SA-2.0",
          "CC-BY-SA-2.5",
          "CC-BY-SA-3.0",
          "CC-BY-SA-4.0",
          "CC-PDDC",
          "CC0-1.0",
          "LicenseRef-own-work",
          "LicenseRef-public-domain",
          "MIT",
          "ODC-By-1.0",
          "ODbL-1.0",
          "PDDL-1.0",
          "Unlicense");

  private Licences() {}

  /** The identifiers accepted, in alphabetical order. */
  public static List<String> open() {
    return OPEN;
  }

  /**
   * Checks an expression of identifiers joined by {@code " AND "}.
   *
   * @return the expression
   * @throws IllegalArgumentException if a part of it is no accepted identifier; the nearest is
   *     named
   */
  static String require(String expression) {
    for (String id : expression.split(" AND ", -1)) {
      if (!OPEN.contains(id)) {
        throw new IllegalArgumentException(
            "licence has '" + id + "', joined by ' AND '; " + Spelling.hint(id, OPEN));
      }
    }
    return expression;
  }
}
