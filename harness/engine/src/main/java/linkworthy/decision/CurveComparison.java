package linkworthy.decision;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.Set;
import java.util.regex.Pattern;
import linkworthy.input.Require;
import linkworthy.statistics.BcaInterval;
import linkworthy.statistics.Cell;

/**
 * Two families of codecs in one condition, in numbers: mean PSNR against mean sent bits per pixel
 * of the families' codecs.
 *
 * <p>A family is three or more codecs of one transform, arrangement and protection that differ in
 * the components kept (or JPEG quality) at one step; or, of what is left, in the step at one number
 * of components. The first family of the study is the reference of all others.
 *
 * @param condition where
 * @param reference name of the family that the other is compared with
 * @param family its name
 * @param pchip by monotone piecewise cubics; empty if it was refused
 * @param cubic by polynomials of third order; empty if it was refused or the curves have other than
 *     four points
 * @param psnrInterval interval of the first number by piecewise cubics, in dB, over other pictures
 *     like these: {@link BcaInterval} with the pictures as cases
 * @param rateInterval likewise of the second, in per cent
 * @param refusal why there are no numbers, or empty
 */
public record CurveComparison(
    Measurements.Condition condition,
    String reference,
    String family,
    Optional<BjontegaardDelta> pchip,
    Optional<BjontegaardDelta> cubic,
    BcaInterval psnrInterval,
    BcaInterval rateInterval,
    String refusal) {
  /** A setting that differs along a curve, as labels write it. */
  private static final Pattern SWEPT =
      Pattern.compile("(K|share|bpp|floor|step|q)?([0-9.]+|none)(bpp)?");

  public CurveComparison {
    Require.notBlank(reference, "reference");
    Require.notBlank(family, "family");
  }

  /**
   * All comparisons of a run, in the order of its cells; none for fewer than two families.
   *
   * @param measured PSNR and sent bits per pixel of the same run; without them there are no
   *     intervals
   * @param seed of the intervals
   */
  public static List<CurveComparison> of(List<Cell> cells, Measurements measured, long seed) {
    Map<String, Set<String>> families = families(cells);
    Map<Measurements.Condition, List<Cell>> conditions = new LinkedHashMap<>();
    for (Cell cell : cells) {
      conditions
          .computeIfAbsent(
              new Measurements.Condition(
                  cell.impairment(), cell.actsOn(), cell.axis(), cell.severity()),
              c -> new ArrayList<>())
          .add(cell);
    }
    List<CurveComparison> comparisons = new ArrayList<>();
    List<String> names = List.copyOf(families.keySet());
    conditions.forEach(
        (condition, row) -> {
          for (String name : names.subList(Math.min(1, names.size()), names.size())) {
            comparisons.add(
                compare(
                    condition,
                    Family.of(names.get(0), families, row),
                    Family.of(name, families, row),
                    measured,
                    seed));
          }
        });
    return comparisons;
  }

  /** The cells of a family in one condition. */
  private record Family(String name, List<Cell> cells) {
    static Family of(String name, Map<String, Set<String>> families, List<Cell> row) {
      Set<String> codecs = families.getOrDefault(name, Set.of());
      return new Family(name, row.stream().filter(cell -> codecs.contains(cell.codec())).toList());
    }

    List<String> codecs() {
      return cells.stream().map(Cell::codec).toList();
    }
  }

  private static CurveComparison compare(
      Measurements.Condition condition,
      Family reference,
      Family family,
      Measurements measured,
      long seed) {
    try {
      RateCurve a = curve(reference.name, reference.cells);
      RateCurve b = curve(family.name, family.cells);
      boolean four =
          Interpolation.CUBIC.takes(a.points().size())
              && Interpolation.CUBIC.takes(b.points().size());
      BjontegaardDelta pchip = BjontegaardDelta.of(a, b, Interpolation.PCHIP);
      Optional<PictureCurves> curves =
          PictureCurves.of(measured, condition, reference.codecs(), family.codecs());
      return new CurveComparison(
          condition,
          reference.name,
          family.name,
          Optional.of(pchip),
          four ? Optional.of(BjontegaardDelta.of(a, b, Interpolation.CUBIC)) : Optional.empty(),
          interval(curves, BjontegaardDelta::psnrDb, seed),
          interval(curves, BjontegaardDelta::ratePercent, seed),
          "");
    } catch (IllegalArgumentException e) {
      String reason = String.valueOf(e.getMessage()).split("; accepted", 2)[0];
      return new CurveComparison(
          condition,
          reference.name,
          family.name,
          Optional.empty(),
          Optional.empty(),
          BcaInterval.NONE,
          BcaInterval.NONE,
          reason);
    }
  }

  private interface Delta {
    double of(RateCurve reference, RateCurve test, Interpolation interpolation);
  }

  private static BcaInterval interval(Optional<PictureCurves> curves, Delta delta, long seed) {
    return curves
        .map(c -> c.interval((a, b) -> delta.of(a, b, Interpolation.PCHIP), seed))
        .orElse(BcaInterval.NONE);
  }

  private static RateCurve curve(String family, List<Cell> cells) {
    try {
      return new RateCurve(
          cells.stream()
              .map(cell -> new RateCurve.Point(cell.bitsPerPixelMean(), cell.psnrMeanDb()))
              .toList());
    } catch (IllegalArgumentException e) {
      throw new IllegalArgumentException(family + ": " + e.getMessage(), e);
    }
  }

  /** Labels of the codecs of each family, by its name. */
  private static Map<String, Set<String>> families(List<Cell> cells) {
    Map<String, Cell> codecs = new LinkedHashMap<>();
    cells.stream()
        .filter(cell -> !cell.transform().isEmpty())
        .forEach(cell -> codecs.putIfAbsent(cell.codec(), cell));
    Map<String, Set<String>> byStep = new LinkedHashMap<>();
    codecs.forEach((label, cell) -> add(byStep, name(cell, step(cell)), label));
    byStep.values().removeIf(members -> members.size() < RateCurve.FEWEST);
    byStep.values().forEach(codecs.keySet()::removeAll);
    Map<String, Set<String>> byKeep = new LinkedHashMap<>();
    codecs.forEach((label, cell) -> add(byKeep, name(cell, keep(cell)), label));
    byKeep.values().removeIf(members -> members.size() < RateCurve.FEWEST);
    byStep.putAll(byKeep);
    return byStep;
  }

  private static void add(Map<String, Set<String>> families, String name, String label) {
    families.computeIfAbsent(name, n -> new LinkedHashSet<>()).add(label);
  }

  /**
   * Transform, arrangement and the setting in common, then those words of the codec's own label
   * that are no setting which a curve runs through, as its protection. A label that the study chose
   * has no such words.
   */
  private static String name(Cell cell, String last) {
    List<String> name = new ArrayList<>(List.of(cell.transform(), cell.over(), last));
    if (cell.codec().startsWith(cell.transform() + " ")) {
      Arrays.stream(cell.codec().split(" +"))
          .filter(word -> !name.contains(word) && !SWEPT.matcher(word).matches())
          .forEach(name::add);
    }
    return String.join(" ", name).replaceAll(" +", " ").strip();
  }

  private static String step(Cell cell) {
    String step = cell.step();
    return step.isEmpty() ? "" : "step" + (step.endsWith(".0") ? step.replace(".0", "") : step);
  }

  private static String keep(Cell cell) {
    return cell.keep() < 0 ? "" : "K" + cell.keep();
  }
}
