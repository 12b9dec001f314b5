package linkworthy.report;

import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.Set;
import java.util.stream.Collectors;

/**
 * The codecs that plots draw: all of them, or, where they are too many to be told apart, those that
 * no other one beats in mean PSNR and mean sent bits, then those of the highest mean PSNR, over all
 * noisy conditions.
 *
 * @param families with the leading codecs alone
 * @param sentence what is left out, or empty
 */
record Leading(List<CodecFamily> families, String sentence) {
  /** More codecs than this are not drawn: seven panels of six lines. */
  static final int MOST = 42;

  private record Rank(CodecColumn codec, double bits, double psnr) {
    boolean dominates(Rank other) {
      return Dominance.over(bits, psnr, other.bits, other.psnr);
    }
  }

  static Leading of(FigureGrid grid, List<CodecFamily> families) {
    int size = grid.codecs().size();
    if (size <= MOST) {
      return new Leading(families, "");
    }
    Set<String> drawn =
        ranks(grid).stream().limit(MOST).map(r -> r.codec().label()).collect(Collectors.toSet());
    return new Leading(
        families.stream().map(f -> f.only(drawn)).filter(f -> !f.members().isEmpty()).toList(),
        "Plots show "
            + MOST
            + " of "
            + Numbers.count(size)
            + " codecs: the non-dominated ones, then those of the highest mean PSNR over all noisy"
            + " conditions. The tables hold all.");
  }

  private static List<Rank> ranks(FigureGrid grid) {
    List<Condition> conditions =
        grid.noises().stream().flatMap(n -> n.conditions().stream()).toList();
    List<Condition> over = conditions.isEmpty() ? grid.clean().stream().toList() : conditions;
    List<Rank> ranks = new ArrayList<>();
    for (CodecColumn codec : grid.codecs()) {
      ranks.add(
          new Rank(
              codec,
              over.stream().mapToDouble(c -> grid.bits(c, codec)).average().orElse(Double.NaN),
              over.stream().mapToDouble(c -> grid.psnr(c, codec)).average().orElse(Double.NaN)));
    }
    return ranks.stream()
        .sorted(
            Comparator.comparing((Rank r) -> ranks.stream().anyMatch(o -> o.dominates(r)))
                .thenComparingDouble(r -> Double.isNaN(r.psnr()) ? Double.MAX_VALUE : -r.psnr()))
        .toList();
  }
}
