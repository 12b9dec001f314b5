package linkworthy.decision;

import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import linkworthy.statistics.Cell;
import linkworthy.statistics.Standing;

/**
 * Where two leading codecs change order under one noise. Leading are those that have the best mean
 * PSNR at some severity of the noise, as {@code cells.csv} says.
 *
 * @param impairment name of the noise model
 * @param actsOn where the noise acts
 * @param axis key the severities were given by
 * @param crossover the crossing
 */
public record OrderChange(String impairment, String actsOn, String axis, Crossover crossover) {
  private record Noise(String impairment, String actsOn, String axis) {}

  /** All of a run, by noise and in the order of the codecs. */
  public static List<OrderChange> of(List<Cell> cells, Measurements measured) {
    Map<Noise, Set<String>> leading = new LinkedHashMap<>();
    for (Cell cell : cells) {
      if (!cell.axis().isEmpty() && cell.standing() == Standing.BEST) {
        leading
            .computeIfAbsent(
                new Noise(cell.impairment(), cell.actsOn(), cell.axis()),
                n -> new LinkedHashSet<>())
            .add(cell.codec());
      }
    }
    List<OrderChange> changes = new ArrayList<>();
    leading.forEach((noise, codecs) -> addAll(changes, noise, codecs, measured));
    return changes;
  }

  private static void addAll(
      List<OrderChange> changes, Noise noise, Set<String> codecs, Measurements measured) {
    List<Measurements.Condition> conditions =
        measured.conditions().stream()
            .filter(c -> noise.equals(new Noise(c.impairment(), c.actsOn(), c.axis())))
            .toList();
    List<String> leaders = measured.codecs().stream().filter(codecs::contains).toList();
    for (int i = 0; i < leaders.size(); i++) {
      for (int j = i + 1; j < leaders.size(); j++) {
        for (Crossover crossover :
            Crossover.of(measured, conditions, leaders.get(i), leaders.get(j))) {
          changes.add(new OrderChange(noise.impairment(), noise.actsOn(), noise.axis(), crossover));
        }
      }
    }
  }
}
