package linkworthy.app;

import java.nio.file.Path;
import java.util.concurrent.Callable;
import linkworthy.report.ReportRenderer;
import linkworthy.results.ResultsFolder;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Option;
import picocli.CommandLine.Parameters;

/** Tells which codecs of a run meet stated needs. */
@Command(
    name = "shortlist",
    description = {
      "Tell which codecs meet your needs, how surely, and at what price, cheapest first.",
      "",
      "A need names a measure (a column of trials.csv, with dashes; or outage-rate), a level, and",
      "where it must hold (everywhere if it does not say):",
      "  at-least, at-most with for: 0.95   so many of the pictures must reach the level",
      "  mean-at-least, mean-at-most        their mean must; so do at-least, at-most without for",
      "  where: {impairment: burst-loss, loss-rate: \"<= 0.05\"}   in each of these conditions"
    },
    mixinStandardHelpOptions = true,
    footer = {
      "",
      "Exit code 1 if no codec is shown to meet all needs.",
      "",
      "A file of needs:",
      "  confidence: 0.95",
      "  needs:",
      "    - {measure: psnr-db, at-least: 28, for: 0.9, where: {impairment: burst-loss}}",
      "    - {measure: psnr-db, mean-at-least: 30, where: {snr-db: \">= 20\"}}",
      "    - {measure: outage-rate, at-most: 0.01}",
      "    - {measure: bits-per-pixel, at-most: 1.5}",
      "",
      "Example: linkworthy shortlist results/yard/20261201T101500Z-0123abcd --need needs.yaml"
    })
final class ShortlistCommand implements Callable<Integer> {
  private final Surroundings surroundings;

  @Parameters(paramLabel = "RESULTS", description = "Results folder.")
  @SuppressWarnings("NullAway.Init")
  private Path folder;

  @Option(names = "--need", paramLabel = "FILE", required = true, description = "File of needs.")
  @SuppressWarnings("NullAway.Init")
  private Path need;

  @Mixin private final PageOption html = new PageOption();

  ShortlistCommand(Surroundings surroundings) {
    this.surroundings = surroundings;
  }

  @Override
  public Integer call() {
    html.check();
    ResultsFolder results = ResultsFolder.open(folder);
    ShortlistText text = ShortlistText.of(results, need);
    text.lines().forEach(surroundings.out()::println);
    html.writeText(surroundings, () -> new ReportRenderer().render(text.page(results.run())));
    return text.hasAnswer() ? Main.DONE : Main.NO;
  }
}
