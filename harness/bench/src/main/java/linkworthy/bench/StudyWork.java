package linkworthy.bench;

import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.TreeSet;
import java.util.function.ToDoubleFunction;
import linkworthy.corpus.ManifestEntry;
import linkworthy.corpus.Picture;
import linkworthy.noise.Site;
import linkworthy.study.CodecChoice;
import linkworthy.study.ImpairmentChoice;
import linkworthy.study.Study;
import linkworthy.trial.Plan;

/**
 * What each stage of a study of transform codecs has to do, by closed formula. Pictures are h rows
 * by w columns; a basis sees d variables in n observations (rows: d = h, n = w; blocks of side p: d
 * = p^2, n their number) and K is the most components that a study keeps of it.
 *
 * <p>Multiply-adds count two operations on doubles each, additions half of one. Bytes are all loads
 * and stores of the inner loops, near where the loops' data lies: in the first-level cache, or in
 * the second where a whole matrix or picture is swept, or in memory where a picture is new. Steps
 * are operations on integers. Where a count depends on the pictures it is a guess, and the formula
 * says 'about'.
 */
final class StudyWork {
  static final int LEADING = 32;
  private static final int MANY_VARIABLES = 192;

  /** What Lanczos' iteration took for 32 directions of most pictures. */
  private static final double STEPS = 96;

  private final Plan plan;
  private final Study study;
  private final List<Family> families;
  private final int seen;
  private final int lossy;

  /**
   * @throws IllegalArgumentException if the study has other codecs than transforms with a fixed
   *     number of components, or impairments elsewhere than on samples and packets
   */
  StudyWork(Plan plan) {
    this.plan = plan;
    this.study = plan.study();
    this.families = families(study);
    this.seen = 1 + units(Site.SAMPLES);
    this.lossy = units(Site.PACKETS);
    if (seen + lossy != plan.units() / plan.pictures().size()) {
      throw new IllegalArgumentException("only noise on samples and packets can be counted");
    }
  }

  /**
   * The work of a stage in one pass.
   *
   * @param multiplyAdds or operations on doubles, in pairs
   * @param divisions of doubles
   * @param steps on integers
   * @param nearBytes to and from the first-level cache
   * @param cacheBytes to and from the second
   * @param memoryBytes to and from memory
   */
  record Work(
      double multiplyAdds,
      double divisions,
      double steps,
      double nearBytes,
      double cacheBytes,
      double memoryBytes) {
    static final Work NONE = new Work(0, 0, 0, 0, 0, 0);

    static Work near(double multiplyAdds, double bytesOfEach) {
      return new Work(multiplyAdds, 0, 0, multiplyAdds * bytesOfEach, 0, 0);
    }

    static Work cache(double multiplyAdds, double bytes) {
      return new Work(multiplyAdds, 0, 0, 0, bytes, 0);
    }

    static Work steps(double steps) {
      return new Work(0, 0, steps, 0, 0, 0);
    }

    static Work divisions(double divisions) {
      return new Work(0, divisions, 0, 0, 0, 0);
    }

    Work plus(Work other) {
      return new Work(
          multiplyAdds + other.multiplyAdds,
          divisions + other.divisions,
          steps + other.steps,
          nearBytes + other.nearBytes,
          cacheBytes + other.cacheBytes,
          memoryBytes + other.memoryBytes);
    }

    Work times(double factor) {
      return new Work(
          multiplyAdds * factor,
          divisions * factor,
          steps * factor,
          nearBytes * factor,
          cacheBytes * factor,
          memoryBytes * factor);
    }
  }

  /**
   * A stage.
   *
   * @param formula of its work on one picture
   * @param places classes and methods it is seen in
   */
  record Stage(String name, String formula, Work work, List<String> places) {}

  /** Codecs that share a basis and an arrangement. */
  private record Family(String transform, int side, List<Integer> keeps, List<Double> steps) {
    boolean isMean() {
      return transform.equals("mean");
    }

    boolean isPca() {
      return transform.equals("pca");
    }

    int variables(Picture picture) {
      return side == 0 ? picture.height() : side * side;
    }

    int observations(Picture picture) {
      return side == 0
          ? picture.width()
          : (picture.width() + side - 1) / side * ((picture.height() + side - 1) / side);
    }

    int most(Picture picture) {
      return isMean() ? variables(picture) : keeps.get(keeps.size() - 1);
    }

    int codecs() {
      return isMean() ? steps.size() : keeps.size() * steps.size();
    }

    /** Symbols of each quantiser: coefficients, and directions where they are sent. */
    double symbols(Picture picture, int kept) {
      return (double) kept * (observations(picture) + (isPca() ? variables(picture) : 0));
    }
  }

  private static List<Family> families(Study study) {
    Map<String, Family> families = new LinkedHashMap<>();
    Map<String, TreeSet<Integer>> keeps = new LinkedHashMap<>();
    Map<String, TreeSet<Double>> steps = new LinkedHashMap<>();
    for (CodecChoice choice : study.codecs()) {
      Map<String, Object> settings = choice.codec().settings();
      if (!(settings.get("transform") instanceof String transform)
          || !(settings.get("step") instanceof Number step)
          || !(settings.get("keep") instanceof Number || transform.equals("mean"))
          || settings.containsKey("basis")) {
        throw new IllegalArgumentException("codec '" + choice.label() + "' cannot be counted");
      }
      int side = settings.get("side") instanceof Number number ? number.intValue() : 0;
      String name = transform + " " + side;
      keeps.computeIfAbsent(name, unused -> new TreeSet<>());
      steps.computeIfAbsent(name, unused -> new TreeSet<>()).add(step.doubleValue());
      if (settings.get("keep") instanceof Number keep) {
        keeps.get(name).add(keep.intValue());
      }
      families.put(
          name,
          new Family(transform, side, List.copyOf(keeps.get(name)), List.copyOf(steps.get(name))));
    }
    return List.copyOf(families.values());
  }

  private int units(Site site) {
    int severities = 0;
    for (ImpairmentChoice impairment : study.impairments()) {
      severities += impairment.site() == site ? impairment.levels().size() : 0;
    }
    return severities * study.replicates();
  }

  /** All stages in the order a picture meets them. */
  List<Stage> stages(long packets) {
    List<Stage> stages = new ArrayList<>(encoding());
    stages.add(
        new Stage(
            "cut and send packets",
            "about 400 steps a packet, for each codec",
            Work.steps(400.0 * packets),
            List.of(
                "link.Packetizer",
                "link.Packetizer$Filling",
                "codec.Units$Run",
                "codec.Units$RunUnit",
                "link.Channel",
                "link.Packet",
                "codec.TransformCodec.pack")));
    stages.addAll(decoding());
    stages.addAll(judging());
    return stages;
  }

  private List<Stage> encoding() {
    return List.of(
        new Stage(
            "noise on samples",
            "about 60 steps a sample (50 of Philox)",
            perPicture(p -> Work.steps(60.0 * p.size()).times(seen - 1)),
            List.of(
                "noise.GaussianNoise$Additive",
                "noise.SaltAndPepperNoise$Impulses",
                "noise.GaussianDraws")),
        new Stage(
            "arrange and centre",
            "d n; 36 d n bytes",
            perFamily((f, p) -> Work.cache(dn(f, p), 36 * dn(f, p)).times(seen)),
            List.of(
                "codec.Arrangement$Rows.gather", "codec.Arrangement$Blocks.gather",
                "codec.Matrices.centre", "codec.Analysis.of")),
        new Stage(
            "covariance",
            "n d (d + 1) / 2; 12 bytes each",
            perFamily(
                (f, p) ->
                    f.isPca()
                        ? Work.near(dn(f, p) * (f.variables(p) + 1) / 2, 12).times(seen)
                        : Work.NONE),
            List.of("codec.Matrices.covariance")),
        new Stage(
            "eigen: Lanczos",
            "d >= 192: 96 d^2 + 96^2 d + 32 d^2 + d^3 / 6; 8 bytes each",
            perOrder(
                d -> {
                  double work = STEPS * d * d + STEPS * STEPS * d + LEADING * d * d + d * d * d / 6;
                  return d < MANY_VARIABLES ? Work.NONE : Work.cache(work, 8 * work);
                }),
            List.of("codec.Lanczos")),
        new Stage(
            "eigen: values and vectors of T",
            "d >= 192: about 2 times 35 counts and 4 sweeps of 64 lanes in 96 rows",
            perOrder(
                d -> d < MANY_VARIABLES ? Work.NONE : Work.divisions(2 * (35 + 4) * 64 * STEPS)),
            List.of("codec.TridiagonalEigen", "codec.Tridiagonal.reflected")),
        new Stage(
            "eigen: tridiagonal form",
            "d < 192 (and not counted, where Lanczos gives up): d^3; 8 d^3 bytes",
            perOrder(d -> d < MANY_VARIABLES ? Work.cache(d * d * d, 8 * d * d * d) : Work.NONE),
            List.of(
                "codec.Tridiagonal.<init>",
                "codec.Tridiagonal.reflect",
                "codec.Tridiagonal.reflectBothSides")),
        new Stage(
            "eigen: values by QR",
            "d < 192: about 2.6 d^2 divisions and roots, one after the other",
            perOrder(d -> d < MANY_VARIABLES ? Work.divisions(2.6 * d * d) : Work.NONE),
            List.of("codec.SymmetricEigen$Qr.values", "codec.SymmetricEigen", "codec.PcaBasis")),
        new Stage(
            "eigen: all vectors",
            "d < 192: about 3.7 d^3; 16 bytes each",
            perOrder(d -> d < MANY_VARIABLES ? Work.near(3.7 * d * d * d, 16) : Work.NONE),
            List.of(
                "codec.Tridiagonal.vectors",
                "codec.SymmetricEigen$Rotations",
                "codec.SymmetricEigen$Qr.decompose")),
        new Stage(
            "project",
            "K d n; 12 bytes each",
            perFamily(
                (f, p) -> f.isMean() ? Work.NONE : Work.near(f.most(p) * dn(f, p), 12).times(seen)),
            List.of("codec.Analysis.project", "codec.Analysis.component")),
        new Stage(
            "quantise",
            "2 divisions a coefficient or entry of a sent direction",
            perFamily((f, p) -> Work.divisions(2 * coded(f, p)).times(seen)),
            List.of(
                "codec.Quantizer.symbols",
                "codec.Quantizer.index",
                "codec.Symbols.component",
                "codec.Symbols.direction")),
        new Stage(
            "count coded bits",
            "about 20 steps each (4 parameters)",
            perFamily((f, p) -> Work.steps(20 * coded(f, p)).times(seen)),
            List.of("codec.RiceCosts.<init>", "codec.RiceCosts.sums", "codec.RiceCoder$Cost")));
  }

  private List<Stage> decoding() {
    return List.of(
        new Stage(
            "write and read packets",
            "packet losses: about 25 steps a value, for each codec",
            perFamily((f, p) -> Work.steps(25 * decoded(f, p)).times(lossy)),
            List.of(
                "codec.Received",
                "codec.BitReader",
                "codec.RiceCoder",
                "codec.BitWriter",
                "codec.Units$Run.write",
                "codec.TransformCodec.received")),
        new Stage(
            "inverse",
            "K d n, and with packet losses the sum over K of K d n; 12 bytes each",
            perFamily(
                (f, p) ->
                    f.isMean()
                        ? Work.near(0.5 * dn(f, p) * f.codecs() * (seen + lossy), 48)
                        : Work.near(
                            dn(f, p)
                                * f.steps().size()
                                * (f.most(p) * seen
                                    + f.keeps().stream().mapToInt(k -> k).sum() * lossy),
                            12)),
            List.of("codec.TransformCodec.reconstruct", "codec.WholePicture")),
        new Stage(
            "round and clip",
            "2 a sample; 16 bytes a sample from and to memory, as the picture is new",
            perPicture(p -> new Work(2, 0, 0, 0, 0, 16).times((double) p.size() * shown())),
            List.of(
                "codec.Arrangement$Rows.scatter",
                "codec.Arrangement$Blocks.scatter",
                "codec.PictureShape")));
  }

  private List<Stage> judging() {
    return List.of(
        new Stage(
            "PSNR",
            "1.5 a sample; 8 bytes a sample",
            perPicture(p -> Work.cache(1.5 * p.size(), 8.0 * p.size()).times(shown())),
            List.of("quality.Psnr", "trial.Subject.meanSquaredError")),
        new Stage(
            "SSIM",
            "57 and a division a sample; 830 bytes a sample",
            perPicture(p -> new Work(57, 1, 0, 830, 0, 0).times((double) p.size() * shown())),
            List.of("quality.Ssim$Windows", "quality.GaussianRows")));
  }

  /** Pictures shown and judged, for each picture of the study. */
  private int shown() {
    return study.codecs().size() * (seen + lossy);
  }

  private static double dn(Family family, Picture picture) {
    return (double) family.variables(picture) * family.observations(picture);
  }

  /** Symbols made of one seen picture. */
  private static double coded(Family family, Picture picture) {
    return family.steps().size() * family.symbols(picture, family.most(picture));
  }

  /** Values read by all codecs of a family. */
  private static double decoded(Family family, Picture picture) {
    double values = 0;
    for (int kept : family.isMean() ? List.of(family.most(picture)) : family.keeps()) {
      values += family.symbols(picture, kept);
    }
    return values * family.steps().size();
  }

  private interface FamilyWork {
    Work of(Family family, Picture picture);
  }

  private interface OrderWork {
    Work of(double d);
  }

  private interface PictureWork {
    Work of(Picture picture);
  }

  private Work perPicture(PictureWork work) {
    Work sum = Work.NONE;
    for (ManifestEntry entry : plan.pictures()) {
      sum = sum.plus(work.of(plan.manifest().load(entry)));
    }
    return sum;
  }

  private Work perFamily(FamilyWork work) {
    return perPicture(
        picture -> {
          Work sum = Work.NONE;
          for (Family family : families) {
            sum = sum.plus(work.of(family, picture));
          }
          return sum;
        });
  }

  /** For each eigendecomposition. */
  private Work perOrder(OrderWork work) {
    return perFamily(
        (family, picture) ->
            family.isPca() ? work.of(family.variables(picture)).times(seen) : Work.NONE);
  }

  /** Seconds that a work takes at a limit. */
  static final Map<String, ToDoubleFunction<LimitedWork>> LIMITS = limits();

  /** Work and what the machine can do of it in a second. */
  record LimitedWork(Work work, MachineLimits.OneThread limits) {}

  private static Map<String, ToDoubleFunction<LimitedWork>> limits() {
    Map<String, ToDoubleFunction<LimitedWork>> limits = new LinkedHashMap<>();
    limits.put("multiply-adds", w -> w.work().multiplyAdds() / w.limits().multiplyAdds());
    limits.put("divisions", w -> w.work().divisions() / w.limits().divisions());
    limits.put("steps", w -> w.work().steps() / w.limits().steps());
    limits.put("first cache", w -> w.work().nearBytes() / w.limits().nearBytes());
    limits.put("second cache", w -> w.work().cacheBytes() / w.limits().cacheBytes());
    limits.put("memory", w -> w.work().memoryBytes() / w.limits().memoryBytes());
    return limits;
  }
}
