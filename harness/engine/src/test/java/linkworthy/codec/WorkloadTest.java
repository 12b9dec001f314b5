package linkworthy.codec;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.List;
import linkworthy.corpus.Picture;
import linkworthy.corpus.TestPattern;
import linkworthy.input.YamlNode;
import linkworthy.link.Link;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

/** Closed formulas against plain loops that count their own multiply-accumulates. */
class WorkloadTest {
  private static final Link LINK = new Link(96, 23, Link.Order.BY_COMPONENT);
  private static final PictureShape SHAPE = new PictureShape(40, 24, 8);

  private static Codec codec(String entry) {
    return CodecFamilies.installed().read(YamlNode.parse("test", entry), LINK).get(0);
  }

  private static Workload work(String entry, PictureShape shape) {
    Codec codec = codec(entry);
    Picture picture = TestPattern.cvp(shape.width(), shape.height());
    int keep = codec.encode(picture, new Memo()).keep();
    List<Workload> nodes = codec.workloads(shape, keep);
    assertThat(nodes).hasSize(1);
    return nodes.get(0);
  }

  /** Counts each multiply-accumulate as it does it. */
  private static final class Counter {
    private long macs;

    double step(double sum, double a, double b) {
      macs++;
      return sum + a * b;
    }
  }

  private static long counted(double[][] values, int kept, boolean projects, boolean ownBasis) {
    Counter counter = new Counter();
    int d = values.length;
    int n = values[0].length;
    double sum = 0;
    for (double[] variable : values) {
      for (double value : variable) {
        sum = counter.step(sum, value, 1.0 / n);
      }
    }
    if (ownBasis) {
      for (int i = 0; i < d; i++) {
        for (int k = i; k < d; k++) {
          for (int j = 0; j < n; j++) {
            sum = counter.step(sum, values[i][j], values[k][j]);
          }
        }
      }
      for (int i = 0; i < kept * d; i++) {
        sum = counter.step(sum, i, 1);
      }
    }
    for (int k = 0; k < kept; k++) {
      for (int j = 0; j < n; j++) {
        for (int i = 0; projects && i < d; i++) {
          sum = counter.step(sum, values[i][j], k);
        }
        sum = counter.step(sum, j, 1);
      }
    }
    assertThat(sum).isNotNaN();
    return counter.macs;
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "{transform: mean, step: 16} | rows | 24 | false | false",
        "{transform: mean, keep: 0} | rows | 0 | false | false",
        "{transform: dct, keep: 10} | blocks | 10 | true | false",
        "{transform: dct, over: rows, keep: 7} | rows | 7 | true | false",
        "{transform: wht, keep: 5} | blocks | 5 | true | false",
        "{transform: pca, over: rows, keep: 6} | rows | 6 | true | true",
        "{transform: pca, over: blocks, keep: 3} | blocks | 3 | true | true"
      })
  void formulasEqualTheCount(
      String entry, String over, int kept, boolean projects, boolean ownBasis) {
    Arrangement arrangement =
        over.equals("rows") ? new Arrangement.Rows() : new Arrangement.Blocks(8);
    double[][] values = arrangement.gather(TestPattern.cvp(40, 24));
    long d = values.length;
    long eigen = ownBasis ? 9 * d * d * d / 2 : 0;
    assertThat(work(entry, SHAPE).macs())
        .isEqualTo(counted(values, kept, projects, ownBasis) + eigen);
  }

  /**
   * Eigenvectors cost about 9 d^3 floating-point operations (Golub and Van Loan, from memory), two
   * to a multiply-accumulate. Counted on the algorithm of the textbook: Householder reduction, its
   * accumulation, and implicit QR with 1.7 steps for each eigenvalue (common practice, no source).
   */
  @Test
  void theEigenTermIsOfTheRightSize() {
    for (long d : new long[] {64, 256, 512}) {
      long reduction = 0;
      long accumulation = 0;
      for (long k = 1; k < d; k++) {
        reduction += k * k + k * k;
        accumulation += 2 * k * k;
      }
      double sweeps = 0;
      for (long k = 1; k <= d; k++) {
        sweeps += 1.7 * k * 2 * d;
      }
      double counted = reduction + accumulation + sweeps;
      assertThat(9.0 * d * d * d / 2 / counted).isBetween(0.5, 2.0);
    }
  }

  /** A separable transform of each block and one division a coefficient, padded blocks included. */
  @Test
  void jpegEqualsTheCount() {
    Counter counter = new Counter();
    double sum = 0;
    for (int block = 0; block < 6 * 4; block++) {
      for (int direction = 0; direction < 2; direction++) {
        for (int line = 0; line < 8; line++) {
          for (int k = 0; k < 8; k++) {
            for (int i = 0; i < 8; i++) {
              sum = counter.step(sum, k, i);
            }
          }
        }
      }
      for (int k = 0; k < 64; k++) {
        sum = counter.step(sum, k, 1);
      }
    }
    assertThat(sum).isNotNaN();
    assertThat(work("{jpeg: baseline, quality: 50}", new PictureShape(41, 25, 8)).macs())
        .isEqualTo(counter.macs);
  }

  /**
   * Lifting as ITU-T T.800 Annex F has it (from memory): each step updates every other sample by
   * one factor times the sum of its neighbours; cdf-9-7 has four steps and scales every sample.
   */
  @ParameterizedTest
  @CsvSource({"cdf-9-7, 4, true, 3", "cdf-5-3, 2, false, 2"})
  void waveletsEqualTheCount(String wavelet, int steps, boolean scales, int levels) {
    Counter counter = new Counter();
    double sum = 0;
    int side = 64;
    for (int level = 0; level < levels; level++) {
      int n = side >> level;
      for (int direction = 0; direction < 2; direction++) {
        for (int line = 0; line < n; line++) {
          for (int step = 0; step < steps; step++) {
            for (int i = step % 2; i < n; i += 2) {
              sum = counter.step(sum, i, step);
            }
          }
          for (int i = 0; scales && i < n; i++) {
            sum = counter.step(sum, i, 1);
          }
        }
      }
    }
    for (int i = 0; i < side * side; i++) {
      sum = counter.step(sum, i, 1);
    }
    assertThat(sum).isNotNaN();
    String entry = "wavelet: " + wavelet + "\nlevels: " + levels;
    assertThat(work(entry, new PictureShape(side, side, 8)).macs()).isEqualTo(counter.macs);
  }

  @Test
  void memoryHoldsThePictureAndTheBasis() {
    assertThat(work("{transform: dct, keep: 10}", SHAPE).memoryBytes())
        .isEqualTo(40 * 24 + 4 * (64 + 15 + 10 * 64) + 96);
    assertThat(work("{transform: pca, over: rows, keep: 6}", SHAPE).memoryBytes())
        .isEqualTo(40 * 24 + 4 * (24 + 40 + 2 * 24 * 24) + 96);
  }

  /** The camera passes all samples on and computes nothing; each helper gets its tile. */
  @Test
  void tilesAreTheWorkOfHelpers() {
    Codec codec = codec("{transform: pca, over: tiles, grid: 2x2, keep: 4}");
    List<Workload> nodes = codec.workloads(SHAPE, 4);
    assertThat(nodes).hasSize(5);
    assertThat(nodes.get(0).macs()).isZero();
    long tileBits = 8L * 20 * 12 + 3 * 8 * 23;
    for (Workload helper : nodes.subList(1, 5)) {
      assertThat(helper.rawBitsReceived()).isEqualTo(tileBits);
      assertThat(helper.rawBitsSent()).isZero();
      assertThat(helper.macs())
          .isEqualTo(
              codec("{transform: pca, over: rows, keep: 4}")
                  .workloads(new PictureShape(20, 12, 8), 4)
                  .get(0)
                  .macs());
    }
    assertThat(nodes.get(0).rawBitsSent()).isEqualTo(4 * tileBits);
  }
}
