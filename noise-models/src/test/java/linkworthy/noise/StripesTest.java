package linkworthy.noise;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.List;
import java.util.Map;
import java.util.stream.IntStream;
import linkworthy.corpus.Picture;
import org.junit.jupiter.api.Test;

class StripesTest extends NoiseProcessContractTest {
  @Override
  protected String id() {
    return "stripes";
  }

  @Override
  protected List<Severity> refused() {
    return List.of(new Severity("density", 0.1));
  }

  /** Rounding adds 1/12 (Sheppard). */
  @Override
  protected double expectedError(double equivalentNoiseVariance) {
    return equivalentNoiseVariance + 1.0 / 12;
  }

  private static Picture noisy(double columns) {
    Picture grey = Measured.flat(40, 30, 8, 128);
    Impairment.OnSamples impairment =
        (Impairment.OnSamples)
            new Stripes()
                .at(
                    new Severity(Severity.VARIANCE, 100),
                    Map.of("columns", columns),
                    Site.SAMPLES,
                    SignalStatistics.of(grey));
    return impairment.apply(grey, Measured.stream(51));
  }

  @Test
  void rowsOrColumnsAreShiftedAsAWhole() {
    int[] rows = noisy(0).samples();
    int[] columns = noisy(1).samples();
    for (int i = 0; i < rows.length; i++) {
      assertThat(rows[i]).isEqualTo(rows[i / 40 * 40]);
      assertThat(columns[i]).isEqualTo(columns[i % 40]);
    }
    assertThat(IntStream.range(0, 30).map(y -> rows[y * 40]).distinct().count()).isGreaterThan(10);
    assertThat(IntStream.range(0, 40).map(x -> columns[x]).distinct().count()).isGreaterThan(10);
    int[] firstRows = IntStream.range(0, 30).map(y -> rows[y * 40]).toArray();
    assertThat(IntStream.range(0, 30).map(x -> columns[x]).toArray()).isEqualTo(firstRows);
  }
}
