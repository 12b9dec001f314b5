package linkworthy.report;

import static java.lang.Double.NaN;

import java.awt.image.BufferedImage;
import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.io.UncheckedIOException;
import java.util.ArrayList;
import java.util.Base64;
import java.util.List;
import java.util.Locale;
import javax.imageio.ImageIO;

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

  /** The full page with every section there is. */
  static ReportPage rich() {
    ReportPage full = full();
    Condition noise = condition("gaussian", "samples", "snr-db", 20, 20);
    String label = "dct blocks8 K4 step8";
    return new PageBuilder(full)
        .figures(full.figures().stream().map(SamplePages::withTrial).toList())
        .costs(
            new Costs(
                "Node 'mote': 230 nJ to send a bit. Source: made up",
                64,
                List.of(new Costs.CodecCost(label, 1_234_567, 63.99, 1.5, 1.5, 20, 4321.9)),
                List.of(
                    new Costs.NodeShare(
                        label, "helper 1", 716_000, 38.5, 0, 31_044, 5788.4, 0, 9.235))))
        .comparisons(
            new Comparisons(
                List.of(
                    new Comparisons.CurveGap(
                        noise,
                        "pca rows, step8",
                        "dct blocks8, step8",
                        new Comparisons.Delta(2.5, -40, true),
                        new Comparisons.Delta(2.4, -39, true),
                        new Comparisons.Interval(1.9, 3.2),
                        new Comparisons.Interval(-45, -33),
                        "")),
                List.of(new Comparisons.Crossing(noise, label, "mean rows step16", 17, 15, 19))))
        .predictions(
            new Predicted(noise, label, 30, 30.09, 0.01, ""),
            new Predicted(noise, "pca rows K4 step8", NaN, 30, 0.2, "found in the picture"))
        .particulars(
            new Particulars(
                spreads(full),
                gallery(noise, label),
                shortlist(label),
                "name: yard-cameras\nseed: 7\n",
                List.of("The record is complete.")))
        .build();
  }

  /** The rich page with few codecs and noises: every kind of thing, not many of each. */
  static ReportPage sketch() {
    ReportPage rich = rich();
    List<Figure> few =
        rich.figures().stream()
            .filter(f -> f.condition().isClean() || f.condition().impairment().startsWith("b"))
            .filter(f -> f.codec().label().matches("dct blocks8 K(4|8) .*|mean rows step16"))
            .toList();
    return new PageBuilder(rich).figures(few).build();
  }

  /** A page with another spread over pictures. */
  static ReportPage with(ReportPage page, List<Particulars.Spread> spreads) {
    return new PageBuilder(page)
        .particulars(new Particulars(spreads, Gallery.NONE, null, "", List.of()))
        .build();
  }

  /** A page on which every text that comes from outside is this one. */
  static ReportPage hostile(String text) {
    CodecColumn codec = new CodecColumn(text, text, text, text, text);
    Condition condition = new Condition(text, text, text, 1, 9, 9, 20);
    Figure bare = bare(condition, codec, 30, 1);
    Gallery gallery = gallery(condition, text);
    Gallery.Subject subject = gallery.noises().get(0).subjects().get(0);
    return new ReportPage(
        text,
        text,
        new Answer(text, text, List.of(text), List.of(text), text),
        List.of(
            new Figure(
                condition,
                codec,
                bare.evidence(),
                bare.quality(),
                1,
                0.5,
                bare.comparison(),
                text)),
        0.95,
        List.of(new PictureCredit(text, 1, 1, text, text, "https://x/\"onload=\"a", text)),
        new Provenance(
            new Provenance.Program(text, text, text),
            new Provenance.Fingerprints(text, text),
            List.of(new Provenance.NoiseModel(text, text, text)),
            1,
            new Provenance.Run(text, text, 1, 1),
            List.of(new Fact(text, text))),
        new Costs(
            text,
            64,
            List.of(new Costs.CodecCost(text, 1, 2, 3, 4, 5, 6)),
            List.of(new Costs.NodeShare(text, text, 1, 2, 3, 4, 5, 6, 7))),
        new Comparisons(
            List.of(
                new Comparisons.CurveGap(
                    condition,
                    text,
                    text,
                    Comparisons.Delta.NONE,
                    Comparisons.Delta.NONE,
                    Comparisons.Interval.NONE,
                    Comparisons.Interval.NONE,
                    text)),
            List.of(new Comparisons.Crossing(condition, text, text, 1, 1, 1))),
        List.of(
            new Predicted(condition, text, 30, 30, 0.1, ""),
            new Predicted(condition, text, NaN, 30, 0.1, text)),
        new Particulars(
            List.of(new Particulars.Spread(condition, text, List.of(29.0, 31.0))),
            new Gallery(
                List.of(text),
                text,
                List.of(
                    new Gallery.Shown(
                        condition,
                        List.of(
                            new Gallery.Subject(
                                text,
                                text,
                                subject.whole(),
                                subject.crop(),
                                subject.clean(),
                                subject.scenes()))))),
            shortlist(text),
            text,
            List.of(text)));
  }

  private static Figure withTrial(Figure f) {
    return new Figure(
        f.condition(),
        f.codec(),
        f.evidence(),
        f.quality(),
        f.bitsPerPixel(),
        f.outageRate(),
        f.comparison(),
        "0123456789abcdef");
  }

  private static List<Particulars.Spread> spreads(ReportPage page) {
    List<Particulars.Spread> spreads = new ArrayList<>();
    for (Figure figure : page.figures()) {
      List<Double> pictures = new ArrayList<>();
      for (int i = 0; i < 12; i++) {
        pictures.add(figure.quality().psnrMeanDb() + i - 5.5);
      }
      spreads.add(new Particulars.Spread(figure.condition(), figure.codec().label(), pictures));
    }
    return spreads;
  }

  static ShortlistPage shortlist(String label) {
    return new ShortlistPage(
        "yard-cameras",
        "Choose a codec",
        label + " is the cheapest codec shown to meet all needs.",
        "Each word is wrong with a chance of at most 0.01.",
        List.of("mean psnr-db at least 28"),
        List.of(
            new ShortlistPage.Row(
                label,
                "0.190",
                "26.20",
                false,
                List.of(new ShortlistPage.Entry("meets", "28.4", "bound 28.1, clean")),
                "meets"),
            new ShortlistPage.Row(
                "mean rows step16",
                "3.310",
                "34.60",
                true,
                List.of(new ShortlistPage.Entry("undecided", "27.9", "bound 28.9, clean")),
                "undecided")),
        List.of("mean rows step16: need 1 is on the wrong side, about 40 pictures"),
        List.of("A need must hold in each of its conditions."),
        "0.1.0");
  }

  /** One noise, one picture, one severity, two codecs. */
  static Gallery gallery(Condition noise, String label) {
    Gallery.Image image = image();
    return new Gallery(
        List.of("Pictures: the typical one."),
        "",
        List.of(
            new Gallery.Shown(
                noise,
                List.of(
                    new Gallery.Subject(
                        "typical",
                        "field-1",
                        image,
                        new Gallery.Crop(2, 2, 8, 8),
                        image,
                        List.of(
                            new Gallery.Scene(
                                noise,
                                image,
                                List.of(
                                    decoded(label, image),
                                    decoded("mean rows step16", image)))))))));
  }

  private static Gallery.Decoded decoded(String codec, Gallery.Image image) {
    return new Gallery.Decoded(
        codec,
        "reference",
        image,
        image,
        0.5,
        28,
        0.8,
        codec.startsWith("mean"),
        "0123456789abcdef");
  }

  private static Gallery.Image image() {
    BufferedImage grey = new BufferedImage(32, 32, BufferedImage.TYPE_BYTE_GRAY);
    for (int i = 0; i < 32 * 32; i++) {
      grey.getRaster().setSample(i % 32, i / 32, 0, i * 37 % 256);
    }
    ByteArrayOutputStream bytes = new ByteArrayOutputStream();
    try {
      ImageIO.write(grey, "png", bytes);
    } catch (IOException e) {
      throw new UncheckedIOException(e);
    }
    return new Gallery.Image(Base64.getEncoder().encodeToString(bytes.toByteArray()), 32, 32);
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
        provenance(),
        null,
        Comparisons.NONE,
        List.of(),
        Particulars.NONE);
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
