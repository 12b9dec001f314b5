package linkworthy.bench;

import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;

/**
 * Whether intervals and verdicts are as sure as they say, on invented trials whose truth is known:
 * the program's own cells, rule for early ends, drift, shortlist and curves, on as many tables as
 * wanted.
 */
public final class EvidenceSimulation {
  private static final int REPETITIONS = 10_000;
  private static final long SEED = 20_261_201;
  private static final double TAIL = 0.001;

  private EvidenceSimulation() {}

  /** Arguments: the number of repetitions of each figure (10 000 unless given). */
  public static void main(String[] args) {
    int repetitions = args.length > 0 ? Integer.parseInt(args[0]) : REPETITIONS;
    List<Claim> claims = claims(repetitions, SEED);
    markdown(claims).forEach(System.out::println);
    System.out.println();
    System.out.println(
        claims.stream().filter(claim -> claim.isBroken(TAIL)).count()
            + " of "
            + claims.size()
            + " figures are outside what is promised");
  }

  static List<Claim> claims(int repetitions, long seed) {
    List<Claim> claims = new ArrayList<>();
    claims.addAll(new CoverageSimulation(repetitions, seed).claims());
    claims.addAll(new DriftSimulation(repetitions, seed).claims());
    claims.addAll(new ShortlistSimulation(repetitions, seed).claims());
    claims.addAll(new CurveSimulation(repetitions, seed).claims());
    return claims;
  }

  /** A table for each name of one; figures that break their promise are marked. */
  static List<String> markdown(List<Claim> claims) {
    Map<String, Map<String, Map<String, Claim>>> tables = new LinkedHashMap<>();
    for (Claim claim : claims) {
      tables
          .computeIfAbsent(claim.table(), name -> new LinkedHashMap<>())
          .computeIfAbsent(claim.row(), name -> new LinkedHashMap<>())
          .put(claim.column(), claim);
    }
    List<String> lines = new ArrayList<>();
    tables.forEach(
        (table, rows) -> {
          Set<String> columns = new LinkedHashSet<>();
          rows.values().forEach(row -> columns.addAll(row.keySet()));
          lines.add("");
          lines.add("| " + table + " (percent) | " + String.join(" | ", columns) + " |");
          lines.add("|---".repeat(columns.size() + 1) + "|");
          rows.forEach((name, row) -> lines.add(line(name, row, columns)));
        });
    return lines;
  }

  private static String line(String name, Map<String, Claim> row, Set<String> columns) {
    StringBuilder line = new StringBuilder("| " + name + " |");
    for (String column : columns) {
      Claim claim = row.get(column);
      line.append(claim == null ? "" : " " + claim.text());
      line.append(claim != null && claim.isBroken(TAIL) ? " **outside** |" : " |");
    }
    return line.toString();
  }
}
