package linkworthy.report;

import java.util.List;
import org.jspecify.annotations.Nullable;

/** A page like another one, except for what is set. */
final class PageBuilder {
  private final ReportPage page;
  private List<Figure> figures;
  private double confidenceLevel;
  private List<PictureCredit> pictures;
  private @Nullable Costs costs;
  private Comparisons comparisons;
  private List<Predicted> predictions;
  private Particulars particulars;

  PageBuilder(ReportPage page) {
    this.page = page;
    this.figures = page.figures();
    this.confidenceLevel = page.confidenceLevel();
    this.pictures = page.pictures();
    this.costs = page.costs();
    this.comparisons = page.comparisons();
    this.predictions = page.predictions();
    this.particulars = page.particulars();
  }

  PageBuilder figures(List<Figure> set) {
    figures = set;
    return this;
  }

  PageBuilder confidenceLevel(double set) {
    confidenceLevel = set;
    return this;
  }

  PageBuilder pictures(PictureCredit... set) {
    pictures = List.of(set);
    return this;
  }

  PageBuilder costs(Costs set) {
    costs = set;
    return this;
  }

  PageBuilder comparisons(Comparisons set) {
    comparisons = set;
    return this;
  }

  PageBuilder predictions(Predicted... set) {
    predictions = List.of(set);
    return this;
  }

  PageBuilder particulars(Particulars set) {
    particulars = set;
    return this;
  }

  ReportPage build() {
    return new ReportPage(
        page.title(),
        page.question(),
        page.answer(),
        figures,
        confidenceLevel,
        pictures,
        page.provenance(),
        costs,
        comparisons,
        predictions,
        particulars);
  }
}
