package linkworthy.codec;

import java.util.Arrays;
import linkworthy.corpus.Picture;

/**
 * What a decoder shows when everything arrived, for every number of components: each picture is
 * built on the one with fewer components, and no bit is written or read. The same terms are added
 * in the same order as from a stream, so the pictures are equal. Safe for several threads.
 */
final class WholePicture {
  private final PictureShape shape;
  private final Arrangement arrangement;
  private final Basis basis;
  private final Analysis analysis;
  private final Symbols symbols;
  private final Quantization quantization;
  private double[][] sums = new double[0][];
  private int reached;

  WholePicture(
      PictureShape shape,
      Arrangement arrangement,
      Basis basis,
      Analysis analysis,
      Symbols symbols,
      Quantization quantization) {
    this.shape = shape;
    this.arrangement = arrangement;
    this.basis = basis;
    this.analysis = analysis;
    this.symbols = symbols;
    this.quantization = quantization;
  }

  /** The picture with the first components; quickest where their number grows from call to call. */
  synchronized Picture upTo(int kept) {
    if (sums.length == 0 || kept < reached) {
      start();
    }
    if (basis.isIdentity()) {
      for (int i = reached; i < kept; i++) {
        Matrices.add(sums[i], 0, 1, coefficients(i));
      }
    } else {
      addComponents(reached, kept);
    }
    reached = kept;
    int[] samples = new int[shape.size()];
    double[] raised = new double[analysis.observations()];
    for (int i = 0; i < sums.length; i++) {
      arrangement.scatter(sums[i], i, shape, raised, samples);
    }
    return new Picture(shape.width(), shape.height(), shape.bitDepth(), samples);
  }

  private void start() {
    if (sums.length == 0) {
      sums = new double[analysis.variables()][analysis.observations()];
    }
    for (int i = 0; i < sums.length; i++) {
      Arrays.fill(sums[i], analysis.means()[i]);
    }
    reached = 0;
  }

  private void addComponents(int from, int to) {
    double[][] rows = new double[to - from][];
    double[][] directions = new double[to - from][];
    for (int k = from; k < to; k++) {
      rows[k - from] = coefficients(k);
      directions[k - from] = direction(k);
    }
    double[] factors = new double[rows.length];
    for (int i = 0; i < sums.length; i++) {
      for (int k = 0; k < factors.length; k++) {
        factors[k] = directions[k][i];
      }
      Matrices.addCombination(sums[i], factors, rows);
    }
  }

  private double[] coefficients(int k) {
    return quantization.component(k).values(symbols.component(k));
  }

  private double[] direction(int k) {
    return basis.isSent()
        ? symbols.directionQuantizer(k).values(symbols.direction(k))
        : analysis.direction(k);
  }
}
