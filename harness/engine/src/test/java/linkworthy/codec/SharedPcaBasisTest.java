package linkworthy.codec;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalStateException;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.Arrays;
import java.util.List;
import linkworthy.corpus.Picture;
import linkworthy.corpus.TestPattern;
import linkworthy.input.BadInput;
import linkworthy.input.YamlNode;
import linkworthy.link.Link;
import org.junit.jupiter.api.Test;

class SharedPcaBasisTest {
  private static final Link LINK = new Link(96, 23, Link.Order.BY_COMPONENT);
  private static final Arrangement BLOCKS = new Arrangement.Blocks(8);

  private static Training training(Picture... pictures) {
    return new Training(pictures.length, i -> pictures[i], "test");
  }

  private static Codec codec(String entry) {
    return CodecFamilies.installed().read(YamlNode.parse("study.yaml", entry), LINK).get(0);
  }

  private static double[][] centred(Picture picture) {
    double[][] values = BLOCKS.gather(picture);
    for (double[] variable : values) {
      double mean = Arrays.stream(variable).average().orElseThrow();
      Arrays.setAll(variable, j -> variable[j] - mean);
    }
    return values;
  }

  private static double[][] learnt(Training training) {
    return new SharedPcaBasis(training)
        .directions(BLOCKS, new PictureShape(64, 64, 8), new double[0][])
        .rows();
  }

  private static void assertAlike(double[][] some, double[][] others, int count) {
    for (int k = 0; k < count; k++) {
      assertThat(some[k]).containsExactly(others[k], within(1e-6));
    }
  }

  @Test
  void onePictureGivesItsOwnComponents() {
    Picture picture = TestPattern.cvp(128);
    assertAlike(
        learnt(training(picture)), PcaBasis.of(Matrices.covariance(centred(picture))).rows(), 12);
  }

  /** Pooling is the covariance of all observations, each less its own picture's means. */
  @Test
  void everyObservationCountsOnce() {
    Picture small = TestPattern.cvp(40, 48);
    Picture large = TestPattern.cvp(160, 96);
    double[][] both = centred(small);
    double[][] more = centred(large);
    for (int i = 0; i < both.length; i++) {
      int n = both[i].length;
      both[i] = Arrays.copyOf(both[i], n + more[i].length);
      System.arraycopy(more[i], 0, both[i], n, more[i].length);
    }
    double[][] pooled = PcaBasis.of(Matrices.covariance(both)).rows();
    assertAlike(learnt(training(small, large)), pooled, 12);
    assertAlike(learnt(training(large, small)), pooled, 12);
  }

  @Test
  void directionsAreLearntOnceForAllCodecs() {
    int[] opened = {0};
    Training training =
        new Training(
            1,
            i -> {
              opened[0]++;
              return TestPattern.cvp(64);
            },
            "test");
    for (String keep : List.of("4", "8")) {
      Codec trained =
          codec("{transform: pca, basis: shared, over: blocks, keep: " + keep + "}")
              .trainedOn(training);
      Encoding encoding = trained.encode(TestPattern.cvp(80), new Memo());
      assertThat(encoding.keep()).isEqualTo(Integer.parseInt(keep));
    }
    assertThat(opened[0]).as("once for its shape, once to learn from it").isEqualTo(2);
  }

  /** All directions are there, even those that the training pictures have nothing along. */
  @Test
  void keepingEverythingIsLosslessWhateverItLearntFrom() {
    Picture picture = TestPattern.cvp(61, 45);
    Codec codec =
        codec("{transform: pca, basis: shared, over: blocks, keep: 64, step: none}")
            .trainedOn(training(new Picture(16, 16, 8, new int[256])));
    Decoding decoding =
        codec.decode(PictureShape.of(picture), codec.encode(picture, new Memo()).payloads());
    assertThat(decoding.picture().samples()).isEqualTo(picture.samples());
  }

  /** The basis is installed, not sent: the same picture costs its means and coefficients alone. */
  @Test
  void sendsNoDirections() {
    Picture picture = TestPattern.cvp(96);
    Codec own = codec("{transform: pca, over: rows, keep: 8, step: 8}");
    Codec shared =
        codec("{transform: pca, basis: shared, over: rows, keep: 8, step: 8}")
            .trainedOn(training(picture));
    long ownBits = own.encode(picture, new Memo()).payloadBits();
    long sharedBits = shared.encode(picture, new Memo()).payloadBits();
    assertThat(sharedBits).isLessThan(ownBits * 3 / 4).isGreaterThan(8L * 96);
  }

  @Test
  void untrainedCodecsSayWhatTheyNeed() {
    Codec untrained = codec("{transform: pca, basis: shared, over: blocks, keep: 8}");
    assertThat(untrained.needsTraining()).isTrue();
    assertThat(untrained.training()).isEmpty();
    assertThat(untrained.label()).isEqualTo("pca-shared blocks8 K8 step8");
    assertThat(untrained.description().transform()).isEqualTo("pca-shared");
    assertThatIllegalStateException()
        .isThrownBy(() -> untrained.encode(TestPattern.cvp(64), new Memo()));
    Codec own = codec("{transform: pca, basis: own, keep: 8}");
    assertThat(own.needsTraining()).isFalse();
    assertThat(own.trainedOn(training(TestPattern.cvp(64)))).isSameAs(own);
    assertThat(own.settings()).doesNotContainKey("basis");
  }

  @Test
  void picturesThatDoNotGoTogetherAreRefused() {
    Codec rows = codec("{transform: pca, basis: shared, keep: 8}");
    assertThatThrownBy(() -> rows.trainedOn(training(TestPattern.cvp(64), TestPattern.cvp(80))))
        .isInstanceOf(BadInput.class)
        .hasMessageStartingWith(
            "codec 'pca-shared rows K8 step8': training pictures have 64 and 80")
        .hasMessageContaining("accepted over rows: one number of rows");
    assertThatThrownBy(
            () -> rows.trainedOn(training(TestPattern.cvp(64))).check(new PictureShape(64, 80, 8)))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("has 80 rows, the training pictures have 64");
    Codec blocks = codec("{transform: pca, basis: shared, over: blocks, keep: 8}");
    assertThatThrownBy(
            () ->
                blocks.trainedOn(
                    training(TestPattern.cvp(64), new Picture(16, 16, 12, new int[256]))))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("8 and 12 bits per sample; accepted: one depth");
    assertThatThrownBy(() -> blocks.trainedOn(training(TestPattern.cvp(7))))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("smaller than a block");
  }
}
