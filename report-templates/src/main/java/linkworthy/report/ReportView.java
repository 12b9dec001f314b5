package linkworthy.report;

import java.util.ArrayList;
import java.util.List;
import java.util.stream.Stream;
import org.jspecify.annotations.Nullable;

/** A page laid out for the template: every number is already text. */
record ReportView(
    String summary,
    String level,
    String errorLevel,
    List<CodecFamily> families,
    List<Section> sections,
    List<RatePlot> ratePlots,
    List<KeyEntry> rateKey,
    List<RateTable> rateTables,
    List<LossTable> lossTables,
    List<OutageTable> outageTables,
    String outageSentence,
    String failureSentence,
    List<SeverityRow> severities,
    List<Fact> provenance,
    @Nullable CostView costs,
    ComparisonView comparisons,
    PredictionView predictions,
    String drawn,
    HeatMap heat,
    List<SpreadPlot> spreads,
    List<FigureTable> figures,
    GalleryView gallery) {
  /** Headings of the numbers among every figure. */
  public List<String> numbers() {
    return FigureTable.NUMBERS;
  }

  /** An impairment with its tables and its panels. */
  record Section(String id, String title, List<MatrixTable> tables, List<LinePlot> plots) {}

  /** A family in the key of the rate plots. */
  record KeyEntry(String css, String name, List<KeyMarker> markers) {}

  /** A marker in the key of the rate plots. */
  record KeyMarker(String path, String label) {}

  /** All codecs in one condition, cheapest first. */
  record RateTable(String title, List<RateRow> rows) {}

  /** A codec in one condition. */
  record RateRow(
      int at,
      String codec,
      String bits,
      String psnr,
      String behind,
      String standing,
      String ssim,
      boolean front) {}

  /** All codecs in the harshest condition of an impairment. */
  record LossTable(String title, List<LossRow> rows) {}

  /** How a codec fares when it goes badly. */
  record LossRow(
      int at,
      String codec,
      String psnr,
      String fall,
      String p05,
      String meanMse,
      String outage,
      String failures) {}

  /** Outage rates of an impairment that has any. */
  record OutageTable(String title, List<MatrixTable> tables) {}

  /** A condition as it was asked for and as it came out. */
  record SeverityRow(String noise, String given, String snr, String equivalent, String realised) {}

  static ReportView of(ReportPage page) {
    FigureGrid grid = new FigureGrid(page.figures());
    List<CodecFamily> families = CodecFamily.of(grid.codecs());
    List<FigureGrid.Noise> noises = grid.noises();
    List<OutageTable> outages = outageTables(grid, families, noises);
    Leading leading = Leading.of(grid, families);
    return new ReportView(
        summary(page, grid),
        Numbers.typed(page.confidenceLevel() * 100) + " %",
        Numbers.typed((1 - page.confidenceLevel()) * 100) + " %",
        families,
        sections(grid, families, leading.families(), noises),
        ratePlots(grid, leading.families(), noises),
        rateKey(leading.families()),
        rateTables(grid, noises),
        lossTables(grid, noises),
        outages,
        outageSentence(page, outages),
        failureSentence(page),
        severities(noises),
        provenance(page.provenance()),
        page.costs() == null ? null : CostView.of(page.costs()),
        ComparisonView.of(page.comparisons()),
        PredictionView.of(page.predictions()),
        leading.sentence(),
        HeatMap.of(grid),
        spreads(page, grid, leading.families(), noises),
        FigureTable.of(grid),
        GalleryView.of(page.particulars().gallery(), grid));
  }

  private static String summary(ReportPage page, FigureGrid grid) {
    return String.join(
        " \u00b7 ",
        Numbers.count(grid.codecs().size(), "codec", "codecs"),
        Numbers.count(grid.noises().size(), "noise", "noises"),
        Numbers.count(page.pictures().size(), "picture", "pictures"),
        Numbers.count(page.provenance().run().recorded(), "trial", "trials"));
  }

  private static List<SpreadPlot> spreads(
      ReportPage page, FigureGrid grid, List<CodecFamily> drawn, List<FigureGrid.Noise> noises) {
    List<SpreadPlot> plots = new ArrayList<>();
    for (FigureGrid.Noise noise : noises) {
      String id = "spread-" + (plots.size() + 1);
      plots.addAll(SpreadPlot.of(grid, drawn, noise, page.particulars().spreads(), id));
    }
    return plots;
  }

  private static List<Section> sections(
      FigureGrid grid,
      List<CodecFamily> families,
      List<CodecFamily> drawn,
      List<FigureGrid.Noise> noises) {
    List<Section> sections = new ArrayList<>();
    for (FigureGrid.Noise noise : noises) {
      String id = "noise-" + (sections.size() + 1);
      List<Condition> rows =
          Stream.concat(grid.clean().stream(), noise.conditions().stream()).toList();
      sections.add(
          new Section(
              id,
              noise.title(),
              MatrixTable.psnr(grid, families, rows),
              LinePlot.of(grid, drawn, noise, id)));
    }
    if (noises.isEmpty() && grid.clean().isPresent()) {
      List<Condition> rows = grid.clean().stream().toList();
      sections.add(
          new Section("noise-1", "no noise", MatrixTable.psnr(grid, families, rows), List.of()));
    }
    return sections;
  }

  private static List<RatePlot> ratePlots(
      FigureGrid grid, List<CodecFamily> families, List<FigureGrid.Noise> noises) {
    List<RatePlot> plots = new ArrayList<>();
    for (FigureGrid.Noise noise : noises) {
      String id = "rate-" + (plots.size() + 1);
      plots.addAll(RatePlot.of(grid, families, noise.middle(), id, at(noise, noise.middle())));
    }
    return plots;
  }

  private static String at(FigureGrid.Noise noise, Condition condition) {
    return noise.title() + ", " + MatrixTable.given(condition);
  }

  private static List<KeyEntry> rateKey(List<CodecFamily> families) {
    return families.stream()
        .map(
            family ->
                new KeyEntry(
                    "c" + family.index() % 6 + " d" + family.index() % Shape.KINDS,
                    family.heading(),
                    family.members().stream()
                        .map(m -> new KeyMarker(Shape.at(m.index(), 7, 7), m.label()))
                        .toList()))
        .toList();
  }

  private static List<RateTable> rateTables(FigureGrid grid, List<FigureGrid.Noise> noises) {
    List<RateTable> tables = new ArrayList<>();
    for (FigureGrid.Noise noise : noises) {
      Condition middle = noise.middle();
      List<CodecColumn> front = RatePlot.front(grid, middle);
      List<RateRow> rows =
          grid.codecs().stream()
              .flatMap(codec -> grid.find(middle, codec).stream())
              .sorted((a, b) -> Double.compare(a.bitsPerPixel(), b.bitsPerPixel()))
              .map(figure -> rateRow(grid, figure, front))
              .toList();
      tables.add(new RateTable(at(noise, middle), rows));
    }
    return tables;
  }

  private static RateRow rateRow(FigureGrid grid, Figure figure, List<CodecColumn> front) {
    Figure.Quality quality = figure.quality();
    Standing standing = figure.comparison().standing();
    return new RateRow(
        grid.place(figure.codec()),
        figure.codec().label(),
        Numbers.significant(figure.bitsPerPixel()),
        (Numbers.db(quality.psnrMeanDb())
                + " "
                + MatrixTable.plusMinus(quality.pictureHalfWidthDb()))
            .strip(),
        Numbers.db(figure.comparison().behindBestDb()),
        (standing.mark() + " " + standing.id().replace('-', ' ')).strip(),
        Numbers.index(quality.ssimMean()),
        front.stream().anyMatch(codec -> codec.label().equals(figure.codec().label())));
  }

  private static List<LossTable> lossTables(FigureGrid grid, List<FigureGrid.Noise> noises) {
    List<LossTable> tables = new ArrayList<>();
    for (FigureGrid.Noise noise : noises) {
      Condition harshest = noise.harshest();
      tables.add(
          new LossTable(
              at(noise, harshest),
              grid.codecs().stream()
                  .flatMap(codec -> grid.find(harshest, codec).stream())
                  .map(figure -> lossRow(grid, figure))
                  .toList()));
    }
    return tables;
  }

  private static LossRow lossRow(FigureGrid grid, Figure figure) {
    Figure.Quality quality = figure.quality();
    double clean = grid.clean().map(c -> grid.psnr(c, figure.codec())).orElse(Double.NaN);
    double fall = clean == quality.psnrMeanDb() ? 0 : clean - quality.psnrMeanDb();
    return new LossRow(
        grid.place(figure.codec()),
        figure.codec().label(),
        Numbers.db(quality.psnrMeanDb()),
        Numbers.db(fall),
        Numbers.db(quality.psnrP05Db()),
        Numbers.db(quality.psnrOfMeanMseDb()),
        Numbers.percent(figure.outageRate()),
        Numbers.count(figure.evidence().failures()));
  }

  /** Empty where no codec failed. */
  private static String failureSentence(ReportPage page) {
    long failures = page.figures().stream().mapToLong(f -> f.evidence().failures()).sum();
    if (failures == 0) {
      return "";
    }
    List<String> codecs =
        page.figures().stream()
            .filter(f -> f.evidence().failures() > 0)
            .map(f -> f.codec().label())
            .distinct()
            .toList();
    return "A codec failed in "
        + Numbers.count(failures, "trial", "trials")
        + ", the clean ones included ("
        + String.join(", ", codecs)
        + "): it crashed, hung or gave no picture. These trials are outages that the noise did not"
        + " cause; the column failure of the record says why.";
  }

  private static List<OutageTable> outageTables(
      FigureGrid grid, List<CodecFamily> families, List<FigureGrid.Noise> noises) {
    List<OutageTable> tables = new ArrayList<>();
    for (FigureGrid.Noise noise : noises) {
      boolean any =
          noise.conditions().stream()
              .flatMap(c -> grid.codecs().stream().flatMap(k -> grid.find(c, k).stream()))
              .anyMatch(figure -> figure.outageRate() > 0);
      if (any) {
        tables.add(
            new OutageTable(
                noise.title(), MatrixTable.outages(grid, families, noise.conditions())));
      }
    }
    return tables;
  }

  private static String outageSentence(ReportPage page, List<OutageTable> outages) {
    List<Figure> known =
        page.figures().stream().filter(f -> !Double.isNaN(f.outageRate())).toList();
    if (known.isEmpty()) {
      return "Outage rates are not available.";
    }
    long trials = known.stream().mapToLong(f -> f.evidence().trials()).sum();
    if (outages.isEmpty() && known.stream().anyMatch(f -> f.outageRate() > 0)) {
      return "Outages were seen without noise, and under no noise.";
    }
    return outages.isEmpty()
        ? "No outage was seen in "
            + Numbers.count(trials, "trial", "trials")
            + "; that does not show that none can happen."
        : "Outages were seen under the noises tabled below, and under no other.";
  }

  private static List<SeverityRow> severities(List<FigureGrid.Noise> noises) {
    List<SeverityRow> rows = new ArrayList<>();
    for (FigureGrid.Noise noise : noises) {
      for (Condition condition : noise.conditions()) {
        rows.add(
            new SeverityRow(
                noise.title(),
                MatrixTable.given(condition),
                Numbers.db(condition.snrDb()),
                Numbers.significant(condition.equivalentNoiseVariance()),
                Numbers.significant(condition.realisedNoiseVariance())));
      }
    }
    return rows;
  }

  private static List<Fact> provenance(Provenance from) {
    return List.of(
        new Fact("Program version", from.program().version()),
        new Fact("Study fingerprint", from.fingerprints().study()),
        new Fact("Corpus fingerprint", from.fingerprints().corpus()),
        new Fact("Seed", Long.toString(from.seed())),
        new Fact("Java", from.program().java()),
        new Fact("Operating system", from.program().operatingSystem()),
        new Fact("Start", from.run().start()),
        new Fact("End", from.run().end()),
        new Fact(
            "Trials recorded",
            Numbers.count(from.run().recorded())
                + " of "
                + Numbers.count(from.run().planned())
                + " planned"));
  }
}
