package linkworthy.app;

import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Objects;
import java.util.concurrent.Callable;
import linkworthy.decision.Drift;
import linkworthy.decision.History;
import linkworthy.input.BadInput;
import linkworthy.report.ComparisonPage;
import linkworthy.report.Fact;
import linkworthy.results.FolderFiles;
import linkworthy.results.ResultsFolder;
import org.jspecify.annotations.Nullable;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Option;
import picocli.CommandLine.Parameters;

/** Compares runs. */
@Command(
    name = "drift",
    description = {
      "Compare two results folders cell by cell, or show the history of a study.",
      "What moved, what stayed the same, what is undecided, and what changed in between. With",
      "--over, all runs below a folder.",
      "Exit code 1 only if a cell moved for the worse beyond the tolerance; with --over, in the",
      "newest run against the one before."
    },
    mixinStandardHelpOptions = true,
    footer = {
      "",
      "Examples:",
      "  linkworthy drift results/baselines/baseline results/baseline/20261201T101500Z-0123abcd",
      "  linkworthy drift OLD NEW --tolerance-db 0.05 --html drift.html --junit drift.xml",
      "  linkworthy drift --over results/first-look --html history.html"
    })
final class DriftCommand implements Callable<Integer> {
  private static final double MAX_TOLERANCE_DB = 100;

  private final Surroundings surroundings;

  @Parameters(
      arity = "0..2",
      paramLabel = "OLD NEW",
      description = "Two results folders.",
      hideParamSyntax = true)
  private List<Path> folders = List.of();

  @Option(
      names = "--over",
      paramLabel = "FOLDER",
      description = "Show the history of a study over all its runs below this folder.")
  private @Nullable Path over;

  @Option(
      names = "--tolerance-db",
      paramLabel = "X",
      description = "Smallest difference of mean PSNR that matters (default: ${DEFAULT-VALUE}).")
  private double toleranceDb = 0.1;

  @Option(names = "--all", description = "List every cell, not only the moved and undecided ones.")
  private boolean all;

  @Mixin private final PageOption html = new PageOption();

  @Option(
      names = "--junit",
      paramLabel = "FILE",
      description = "Write JUnit XML as well, a test case a cell (not with --over).")
  private @Nullable Path junit;

  DriftCommand(Surroundings surroundings) {
    this.surroundings = surroundings;
  }

  @Override
  public Integer call() {
    if (!(toleranceDb >= 0 && toleranceDb <= MAX_TOLERANCE_DB)) {
      throw new BadInput(
          "--tolerance-db is " + toleranceDb + "; accepted: 0 to " + (int) MAX_TOLERANCE_DB);
    }
    html.check();
    if (junit != null && Files.isDirectory(junit)) {
      throw new BadInput("--junit is the folder " + junit + "; accepted: a file");
    }
    if (over != null) {
      if (!folders.isEmpty() || junit != null) {
        throw new BadInput(
            "--over goes with neither OLD and NEW nor --junit; accepted: --over FOLDER, --html");
      }
      return history(History.over(over));
    }
    if (folders.size() != 2) {
      throw new BadInput(
          "drift got "
              + (folders.size() == 1 ? "1 folder" : folders.size() + " folders")
              + "; accepted: OLD and NEW, or --over FOLDER");
    }
    return drift(ResultsFolder.open(folders.get(0)), ResultsFolder.open(folders.get(1)));
  }

  private int drift(ResultsFolder old, ResultsFolder now) {
    Drift drift = Drift.between(old, now, toleranceDb);
    String answer = DriftWords.answer(drift, toleranceDb);
    List<ComparisonPage.Table> tables = DriftWords.tables(drift, all);
    if (drift.sameBytes() && !all) {
      surroundings.out().println(answer);
    } else {
      print(answer, tables);
    }
    html.write(surroundings, () -> page(old, now, drift, answer));
    if (junit != null) {
      FolderFiles.replace(junit, JunitReport.of(drift, now.run().study()));
      surroundings.out().println("wrote " + junit);
    }
    return drift.worse() > 0 ? Main.NO : Main.DONE;
  }

  private ComparisonPage page(ResultsFolder old, ResultsFolder now, Drift drift, String answer) {
    return new ComparisonPage(
        now.run().study(),
        "drift",
        "What moved between " + name(old) + " and " + name(now) + "?",
        answer,
        DriftWords.remarks(drift),
        DriftWords.pageTables(drift),
        DriftWords.definitions(toleranceDb),
        List.of(
            PageOption.command(
                "this comparison",
                "drift",
                old.path(),
                now.path(),
                "--tolerance-db",
                DriftWords.plain(toleranceDb)),
            PageOption.command("is the old record sound?", "recheck", old.path()),
            PageOption.command("is the new record sound?", "recheck", now.path())),
        Version.text());
  }

  private static String name(ResultsFolder folder) {
    return folder.path().toAbsolutePath().normalize().getFileName()
        + " ("
        + folder.run().start()
        + ")";
  }

  private int history(History history) {
    List<String> steps = new ArrayList<>(List.of("-"));
    long worse = 0;
    for (int i = 1; i < history.runs().size(); i++) {
      worse = 0;
      try {
        Drift step = Drift.between(history.runs().get(i - 1), history.runs().get(i), toleranceDb);
        steps.add(DriftWords.answer(step, toleranceDb));
        worse = step.worse();
      } catch (BadInput e) {
        steps.add("no common cell");
      }
    }
    List<ComparisonPage.Table> tables = new ArrayList<>(List.of(DriftWords.runs(history, steps)));
    tables.addAll(DriftWords.tables(history));
    String study = history.runs().get(0).run().study();
    int runs = history.runs().size();
    String answer = runs + (runs == 1 ? " complete run of " : " complete runs of ") + study;
    List<String> remarks = history.leftOut().stream().map(why -> "left out: " + why).toList();
    print(answer, tables);
    remarks.forEach(surroundings.out()::println);
    String last = steps.get(steps.size() - 1);
    html.write(surroundings, () -> page(history, answer, last, tables, remarks));
    return worse > 0 ? Main.NO : Main.DONE;
  }

  private ComparisonPage page(
      History history,
      String answer,
      String last,
      List<ComparisonPage.Table> tables,
      List<String> remarks) {
    List<Fact> commands =
        new ArrayList<>(
            List.of(
                PageOption.command(
                    "this history",
                    "drift",
                    "--over",
                    Objects.requireNonNull(over),
                    "--tolerance-db",
                    DriftWords.plain(toleranceDb))));
    int runs = history.runs().size();
    if (runs > 1) {
      commands.add(
          PageOption.command(
              "every cell of the newest step",
              "drift",
              history.runs().get(runs - 2).path(),
              history.runs().get(runs - 1).path(),
              "--all"));
    }
    return new ComparisonPage(
        history.runs().get(0).run().study(),
        "history",
        "How did the study fare over its runs?",
        answer + (runs > 1 ? ". The newest against the one before: " + last : ""),
        remarks,
        tables,
        DriftWords.definitions(toleranceDb),
        commands,
        Version.text());
  }

  private void print(String answer, List<ComparisonPage.Table> tables) {
    surroundings.out().println(answer);
    for (ComparisonPage.Table table : tables) {
      surroundings.out().println();
      TextTable.of(table).forEach(surroundings.out()::println);
    }
  }
}
