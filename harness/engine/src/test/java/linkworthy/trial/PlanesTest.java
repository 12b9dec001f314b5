package linkworthy.trial;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import linkworthy.codec.Codec;
import linkworthy.codec.Decoding;
import linkworthy.codec.Encoding;
import linkworthy.codec.Memo;
import linkworthy.codec.PictureShape;
import linkworthy.corpus.Picture;
import linkworthy.input.YamlNode;
import linkworthy.study.CodecChoice;
import linkworthy.study.StudyReader;
import org.junit.jupiter.api.Test;

/** Pictures in colour, all planes of which are coded. */
class PlanesTest {
  private static final String STUDY =
      """
      name: colour
      pictures: {select: [fig, cat], longest-side: 65, planes: all, chroma: 4:2:0}
      impairments:
        - {noise: gaussian, snr-db: 20}
        - {noise: burst-loss, acts-on: samples, snr-db: 10, label: raw-hop}
        - {noise: burst-loss, loss-rate: 0.3}
      codecs:
        - {transform: dct, keep: 64, step: none, label: lossless}
        - {transform: pca, over: rows, keep: 8}
      replicates: 2
      """;

  private static final String FULL = STUDY.replace("4:2:0", "4:4:4");
  private static final String LUMA = STUDY.replace("planes: all, chroma: 4:2:0", "planes: luma");

  private static Plan plan(String study) {
    return Plan.of(StudyReader.read(YamlNode.parse("colour.yaml", study), Path.of("")));
  }

  private static List<Trial> run(String study, int threads) {
    List<Trial> all = new ArrayList<>();
    Plan plan = plan(study);
    int units = new LocalRunner(plan, threads).run(0, (unit, rows, timings) -> all.addAll(rows));
    assertThat(units).isEqualTo(plan.units());
    return all;
  }

  private static Subject subject(Plan plan, String id) {
    return new Subject(
        plan.planes(
            plan.pictures().stream().filter(e -> e.id().equals(id)).findFirst().orElseThrow()),
        plan.study());
  }

  private static Trial clean(List<Trial> trials, String picture, String codec) {
    return trials.stream()
        .filter(t -> t.picture().equals(picture) && t.codec().equals(codec))
        .filter(t -> t.impairment().equals("none"))
        .findFirst()
        .orElseThrow();
  }

  @Test
  void fullColourLosesNothingWhereTheCodecDoesNot() {
    List<Trial> trials = run(FULL, 2);
    for (String picture : List.of("fig", "cat")) {
      assertThat(clean(trials, picture, "lossless").mse()).isZero();
      assertThat(clean(trials, picture, "lossless").ssim()).isEqualTo(1);
    }
  }

  /** What halving costs alone, by its definition: means over 2 x 2, shown again over 2 x 2. */
  @Test
  void halvedColourCostsWhatHalvingTakes() {
    String even = STUDY.replace("longest-side: 65", "longest-side: 60");
    Plan plan = plan(even);
    List<Picture> planes = subject(plan, "fig").planes();
    assertThat(planes).hasSize(3);
    int width = planes.get(0).width();
    int height = planes.get(0).height();
    assertThat(width % 2 + height % 2).isZero();
    double sum = 0;
    for (Picture plane : planes.subList(1, 3)) {
      int[] samples = plane.samples();
      for (int y = 0; y < height; y += 2) {
        for (int x = 0; x < width; x += 2) {
          int at = y * width + x;
          int[] four = {samples[at], samples[at + 1], samples[at + width], samples[at + width + 1]};
          int mean = (four[0] + four[1] + four[2] + four[3] + 2) / 4;
          for (int sample : four) {
            sum += (sample - mean) * (sample - mean);
          }
        }
      }
    }
    Trial halved = clean(run(even, 2), "fig", "lossless");
    assertThat(halved.mse()).isPositive().isCloseTo(sum / (3 * width * height), within(1e-9));
    assertThat(halved.psnrDb())
        .isCloseTo(10 * StrictMath.log10(255 * 255 / halved.mse()), within(1e-9));
    assertThat(halved.ssim()).as("of luma").isEqualTo(1);
  }

  /** Every bit of every plane counts, and a pixel is a sample of luma. */
  @Test
  void bitsOfAllPlanesCountByPixel() {
    Trial luma = clean(run(LUMA, 2), "fig", "lossless");
    Trial halved = clean(run(STUDY, 2), "fig", "lossless");
    Trial full = clean(run(FULL, 2), "fig", "lossless");
    double pixels = subject(plan(STUDY), "fig").picture().size();
    assertThat(halved.bitsPerPixel()).isCloseTo(halved.sentBits() / pixels, within(1e-9));
    assertThat(halved.sentBits()).isEqualTo(halved.payloadBits() + 8L * 23 * halved.packetsSent());
    assertThat((double) halved.sentBits() / luma.sentBits()).isBetween(1.4, 1.7);
    assertThat((double) full.sentBits() / luma.sentBits()).isBetween(2.9, 3.1);
  }

  /** A gray picture has luma alone: one plane, the same noise, one byte more in each packet. */
  @Test
  void grayPicturesHaveLumaAlone() {
    List<Trial> luma = run(LUMA, 2);
    List<Trial> all = run(STUDY, 2);
    assertThat(subject(plan(STUDY), "cat").planes()).hasSize(1);
    for (int i = 0; i < all.size(); i++) {
      Trial trial = all.get(i);
      assertThat(trial.trial()).isNotEqualTo(luma.get(i).trial());
      if (trial.picture().equals("cat") && !trial.actsOn().equals("packets")) {
        assertThat(trial.mse()).isEqualTo(luma.get(i).mse());
        assertThat(trial.realisedNoiseVariance()).isEqualTo(luma.get(i).realisedNoiseVariance());
        assertThat(trial.sentBits()).isGreaterThan(luma.get(i).sentBits());
      }
    }
  }

  /**
   * SNR is the mean power of the planes over the mean noise variance of the planes. The realised
   * variance of 20 dB on 3 x 65 x 44 samples lies within 15 % of the expected one but for clipping
   * and for a chance below 1e-6 (relative standard error sqrt(2 / 8580) = 1.5 %).
   */
  @Test
  void severitiesHoldForAllPlanesTogether() {
    for (Trial trial : run(STUDY, 2)) {
      if (trial.axis().equals("snr-db")) {
        assertThat(trial.snrDb()).isCloseTo(trial.severity(), within(1e-9));
      }
      if (trial.impairment().equals("gaussian")) {
        assertThat(trial.realisedNoiseVariance() / trial.equivalentNoiseVariance())
            .isBetween(0.6, 1.15);
      }
    }
  }

  @Test
  void rowsDoNotDependOnThreads() {
    assertThat(run(STUDY, 5)).isEqualTo(run(STUDY, 1));
  }

  private static PlaneCoding.Decoded decoded(Subject subject, Codec codec, List<byte[]> payloads) {
    return subject
        .coding()
        .decode(
            (plane, shape, packets) -> codec.decode(shape, packets), subject.shapes(), payloads);
  }

  @Test
  void planesAreToldApartByTheirFirstByte() {
    Plan plan = plan(STUDY);
    Subject subject = subject(plan, "fig");
    Codec codec = plan.study().codecs().get(1).codec();
    Encoding encoding = subject.coding().encode(codec, subject.coded(), subject.memos());
    assertThat(encoding.payloads()).allMatch(p -> p.length <= 96);
    assertThat(encoding.payloads()).extracting(p -> (int) p[0]).isSorted().contains(0, 1, 2);
    assertThat(subject.shapes().get(1).width())
        .isEqualTo((subject.shapes().get(0).width() + 1) / 2);

    List<byte[]> blue = encoding.payloads().stream().filter(p -> p[0] == 1).toList();
    PlaneCoding.Decoded decoded = decoded(subject, codec, blue);
    assertThat(decoded.completeness()).isEqualTo(Decoding.Completeness.PARTIAL);
    assertThat(decoded.luma().samples()).containsOnly(128);
    assertThat(decoded.planes().get(1).samples()).isNotEqualTo(decoded.luma().samples());
    assertThat(decoded.planes().stream().map(PictureShape::of).distinct()).hasSize(1);

    List<byte[]> strange = List.of(new byte[0], new byte[] {3, 1, 2}, new byte[] {-1});
    assertThat(decoded(subject, codec, strange).completeness())
        .isEqualTo(Decoding.Completeness.NOTHING);
    assertThat(decoded(subject, codec, encoding.payloads()).completeness())
        .isEqualTo(Decoding.Completeness.COMPLETE);
  }

  /**
   * Colour planes have the steps of table K.2 of T.81, luma those of K.1: each plane is what its
   * own codec makes of it, and at one quality colour takes fewer bits than by the table of luma.
   */
  @Test
  void colourPlanesHaveTheirOwnSteps() {
    String codecs =
        """
          - {transform: dct, weights: luminance, quality: 50, keep: 64}
          - {jpeg: baseline, quality: 50}
        """;
    Plan plan =
        plan(
            FULL.replaceAll("(?m)^  - \\{transform.*\\n", "")
                .replace("codecs:\n", "codecs:\n" + codecs));
    Subject subject = subject(plan, "fig");
    for (CodecChoice choice : plan.study().codecs()) {
      Codec codec = choice.codec();
      Encoding all = subject.coding().encode(codec, subject.coded(), subject.memos());
      PlaneCoding.Decoded decoded =
          subject
              .coding()
              .decode(
                  (plane, shape, packets) -> PlaneCoding.of(codec, plane).decode(shape, packets),
                  subject.shapes(),
                  all.payloads());
      for (int plane = 0; plane < 3; plane++) {
        Picture coded = subject.coded().get(plane);
        Codec own = plane == 0 ? codec : codec.forChroma();
        List<byte[]> alone = own.encode(coded, new Memo()).payloads();
        assertThat(decoded.planes().get(plane).samples())
            .isEqualTo(own.decode(PictureShape.of(coded), alone).picture().samples());
        if (plane > 0) {
          assertThat(bytes(alone)).isLessThan(bytes(codec.encode(coded, new Memo()).payloads()));
        }
      }
      assertThat(codec.forChroma().settings()).isEqualTo(codec.settings());
    }
  }

  private static int bytes(List<byte[]> payloads) {
    return payloads.stream().mapToInt(p -> p.length).sum();
  }
}
