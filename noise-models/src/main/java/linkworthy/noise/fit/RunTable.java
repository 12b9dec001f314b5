package linkworthy.noise.fit;

import java.util.ArrayList;
import java.util.List;
import linkworthy.noise.MarkovLoss;

/**
 * How often so many packets were lost in a row, beside what each fitted form gives: geometric with
 * {@code (1 - r)(1 - h)} as the chance of one more loss. Runs at the ends of the trace count too.
 *
 * @param forms the fitted forms, the simplest first
 * @param rows lengths 1 to 12, and all longer ones together
 */
public record RunTable(List<ChainEstimate> forms, List<Row> rows) {
  private static final int LONGEST = 12;

  /**
   * A length.
   *
   * @param length the length, or {@code >12}
   * @param observed number of runs
   * @param expected the same as each form gives it
   */
  public record Row(String length, int observed, List<Double> expected) {
    public Row {
      expected = List.copyOf(expected);
    }
  }

  public RunTable {
    forms = List.copyOf(forms);
    rows = List.copyOf(rows);
  }

  /** The table of a fit. */
  public static RunTable of(LossFit fit) {
    List<ChainEstimate> forms = new ArrayList<>(List.of(fit.independent(), fit.simple()));
    fit.threeParameter().ifPresent(forms::add);
    List<Integer> runs = fit.trace().runs(true, false);
    int[] counts = new int[LONGEST + 2];
    runs.forEach(run -> counts[Math.min(run, LONGEST + 1)]++);
    List<Row> rows = new ArrayList<>();
    for (int length = 1; length <= LONGEST + 1; length++) {
      int at = length;
      rows.add(
          new Row(
              length > LONGEST ? ">" + LONGEST : Integer.toString(length),
              counts[length],
              forms.stream().map(form -> expected(form.chain(), at, runs.size())).toList()));
    }
    return new RunTable(forms, rows);
  }

  private static double expected(MarkovLoss chain, int length, int runs) {
    double stay = (1 - chain.r()) * (1 - chain.h());
    double left = runs * StrictMath.pow(stay, length - 1);
    return length > LONGEST ? left : left * (1 - stay);
  }
}
