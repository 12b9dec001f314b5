package linkworthy.report;

import java.util.ArrayList;
import java.util.List;
import java.util.Locale;

/** Made-up pages of a realistic size; no number in them was measured. */
final class SamplePages {
  private static final double SIGNAL_POWER = 2400;

  private SamplePages() {}

  /** A codec and two made-up properties: its loss-free PSNR in dB and its rate. */
  private record Made(CodecColumn codec, double cleanPsnr, double bits) {}

  static CodecColumn codec(String transform, String over, String rest) {
    return new CodecColumn(transform + " " + over + " " + rest, transform, over, "", "");
  }

  private static List<Made> fourteen() {
    List<Made> made = new ArrayList<>();
    int[] keeps = {4, 8, 16, 32};
    for (int i = 0; i < 4; i++) {
      String rest = "K" + keeps[i] + " step8";
      made.add(new Made(codec("pca", "rows", rest), 24.4 + 2.6 * i, 0.21 * (1 << i)));
      made.add(new Made(codec("pca", "blocks8", rest), 26.9 + 2.4 * i, 0.24 + 0.37 * i));
      made.add(new Made(codec("dct", "blocks8", rest), 26.2 + 2.5 * i, 0.19 + 0.36 * i));
    }
    made.add(new Made(codec("mean", "rows", "step16"), 34.6, 3.31));
    made.add(new Made(codec("mean", "rows", "step32"), 28.9, 2.36));
    return made;
  }

  static List<Condition> conditions() {
    List<Condition> conditions = new ArrayList<>();
    conditions.add(Condition.clean());
    for (double snr : new double[] {30, 25, 20, 15, 10, 5}) {
      conditions.add(condition("gaussian", "samples", "snr-db", snr, snr));
    }
    for (double density : new double[] {0.002, 0.005, 0.01, 0.02, 0.05, 0.1}) {
      double snr = 10 * StrictMath.log10(SIGNAL_POWER / (density * 17_000));
      conditions.add(condition("salt-and-pepper", "samples", "density", density, snr));
    }
    for (double rate : new double[] {0.005, 0.01, 0.02, 0.05, 0.1, 0.2}) {
      conditions.add(
          condition("burst-loss", "packets", "loss-rate", rate, -10 * StrictMath.log10(rate)));
    }
    return conditions;
  }

  static Condition condition(
      String impairment, String actsOn, String axis, double severity, double snrDb) {
    double variance = SIGNAL_POWER * StrictMath.pow(10, -snrDb / 10);
    return new Condition(impairment, actsOn, axis, severity, variance, variance * 0.97, snrDb);
  }

  /** 14 codecs, 3 noises, 6 severities each and the clean row. */
  static ReportPage full() {
    List<Figure> figures = new ArrayList<>();
    for (Condition condition : conditions()) {
      figures.addAll(row(condition, fourteen()));
    }
    return page(figures);
  }

  private static List<Figure> row(Condition condition, List<Made> codecs) {
    List<Double> means = codecs.stream().map(made -> mean(condition, made)).toList();
    double best = means.stream().mapToDouble(m -> m).max().orElseThrow();
    List<Figure> figures = new ArrayList<>();
    for (int i = 0; i < codecs.size(); i++) {
      double behind = best - means.get(i);
      Standing standing =
          behind == 0
              ? Standing.BEST
              : behind < 0.35 ? Standing.NOT_DISTINGUISHABLE : Standing.BELOW;
      boolean clean = condition.isClean();
      double growth = condition.actsOn().equals("samples") ? 1 + 4 / (1 + condition.snrDb()) : 1;
      figures.add(
          new Figure(
              condition,
              codecs.get(i).codec(),
              new Figure.Evidence(12, clean ? 12 : 120, 0, 0.01, 0.083),
              new Figure.Quality(
                  means.get(i),
                  clean ? Double.NaN : 0.03 + 0.02 * (i % 4),
                  0.81 + 0.07 * i,
                  means.get(i) - 0.42,
                  means.get(i) - 2.2,
                  StrictMath.min(0.99, means.get(i) / 40)),
              codecs.get(i).bits() * growth,
              condition.actsOn().equals("packets") && condition.severity() > 0.06 && i < 3
                  ? condition.severity() / 10
                  : 0,
              new Figure.Comparison(
                  behind, behind == 0 ? Double.NaN : 0.5 / (1 + behind), standing)));
    }
    return figures;
  }

  /** Coding loss and kept noise add up; blocks and low rates keep less of the noise. */
  private static double mean(Condition condition, Made made) {
    double coding = 65_025 * StrictMath.pow(10, -made.cleanPsnr() / 10);
    double kept = StrictMath.min(1, 0.08 + made.bits() / 3.4);
    double spread = condition.actsOn().equals("packets") ? 0.9 - kept / 4 : kept;
    double mse = coding + spread * condition.equivalentNoiseVariance();
    return 10 * StrictMath.log10(65_025 / mse);
  }

  /** A page around some figures. */
  static ReportPage page(List<Figure> figures) {
    List<PictureCredit> pictures = new ArrayList<>();
    for (int i = 1; i <= 12; i++) {
      pictures.add(
          new PictureCredit(
              String.format(Locale.ROOT, "field-%02d", i),
              256,
              192,
              i % 3 == 0 ? "CC BY 4.0" : "CC0 1.0",
              "A. Photographer, Gate at dusk, no. " + i,
              "https://example.org/pictures/" + i));
    }
    return new ReportPage(
        "yard-cameras",
        "Choose a codec for battery cameras on a 250 kbit/s radio",
        Answer.from(figures),
        figures,
        0.95,
        pictures,
        provenance());
  }

  static Provenance provenance() {
    return new Provenance(
        new Provenance.Program("0.1.0", "17.0.15 (Temurin)", "Linux 6.1 amd64"),
        new Provenance.Fingerprints("8c1f".repeat(16), "03de".repeat(16)),
        List.of(
            new Provenance.NoiseModel("gaussian", "1", "a1b2".repeat(16)),
            new Provenance.NoiseModel("salt-and-pepper", "1", "b2c3".repeat(16)),
            new Provenance.NoiseModel("burst-loss", "1", "c3d4".repeat(16))),
        7,
        new Provenance.Run("2026-12-01T09:00:00Z", "2026-12-01T09:07:31Z", 30_408, 30_408),
        List.of(
            new Fact("signal-power", "variance"),
            new Fact("planes", "luma"),
            new Fact("longest-side", "256"),
            new Fact("link.payload-bytes", "96"),
            new Fact("link.header-bytes", "23"),
            new Fact("link.order", "by-component"),
            new Fact("burst-loss.mean-burst", "4"),
            new Fact("replicates", "10")));
  }

  /** A figure that has only what is named here. */
  static Figure bare(Condition condition, CodecColumn codec, double psnr, double bits) {
    return new Figure(
        condition,
        codec,
        new Figure.Evidence(1, 1),
        new Figure.Quality(psnr, Double.NaN, Double.NaN, psnr, psnr, Double.NaN),
        bits,
        0,
        new Figure.Comparison(Double.NaN, Double.NaN, Standing.UNTESTED));
  }
}
