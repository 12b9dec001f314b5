package linkworthy.app;

import java.nio.file.Path;
import java.util.Locale;
import java.util.Objects;
import java.util.Optional;
import java.util.stream.Collectors;
import linkworthy.input.BadInput;
import linkworthy.noise.NoiseLibrary;
import linkworthy.noise.NoiseModel;
import linkworthy.noise.Site;
import linkworthy.noise.fit.LossFit;
import linkworthy.noise.fit.LossFitText;
import linkworthy.noise.fit.LossTrace;
import linkworthy.noise.fit.ModelFile;
import linkworthy.noise.fit.PicturesFit;
import linkworthy.noise.fit.PicturesFit.Kind;
import org.jspecify.annotations.Nullable;
import picocli.CommandLine.ArgGroup;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Option;
import picocli.CommandLine.Parameters;

/** The noise-model library. */
@Command(
    name = "noise",
    description = "The noise models.",
    mixinStandardHelpOptions = true,
    synopsisSubcommandLabel = "COMMAND",
    footer = {"", "Example: linkworthy noise list"})
final class NoiseCommand {
  private final Surroundings surroundings;

  NoiseCommand(Surroundings surroundings) {
    this.surroundings = surroundings;
  }

  @Command(
      name = "list",
      description = "List the shipped models.",
      mixinStandardHelpOptions = true,
      footer = {"", "Example: linkworthy noise list"})
  void list() {
    for (NoiseModel model : NoiseLibrary.shipped()) {
      surroundings
          .out()
          .println(
              String.format(
                  Locale.ROOT,
                  "%-20s version %d  acts on %-18s  severity by %s",
                  model.id(),
                  model.version(),
                  sites(model),
                  String.join(", ", model.axes())));
    }
  }

  @Command(
      name = "show",
      description = "Show one model: parameters, source and fingerprint.",
      mixinStandardHelpOptions = true,
      footer = {"", "Example: linkworthy noise show burst-loss"})
  void show(@Parameters(paramLabel = "ID", description = "Id of a shipped model.") String id) {
    NoiseModel model = NoiseLibrary.find(id);
    var out = surroundings.out();
    out.println("id:          " + model.id());
    out.println("version:     " + model.version());
    out.println("process:     " + model.process());
    out.println("does:        " + model.implementation().summary());
    out.println("acts on:     " + sites(model));
    model
        .implementation()
        .settings()
        .forEach((key, value) -> out.println("%-13s".formatted(key + ":") + setting(value)));
    out.println("parameters:  " + parameters(model));
    out.println("severity by: " + String.join(", ", model.axes()));
    out.println("source:      " + model.source());
    out.println("notes:       " + model.notes());
    out.println("fingerprint: " + model.fingerprint());
  }

  @Command(
      name = "fit",
      description = {
        "Fit a model to measurements.",
        "Burst losses to a column of 0 (delivered) and 1 (lost), one packet a line; or with",
        "--pictures the noise of a sensor to a folder of its pictures."
      },
      mixinStandardHelpOptions = true,
      footer = {
        "",
        "Exit code 1 if the measurements do not suffice for a model.",
        "Examples:",
        "  linkworthy noise fit trace.csv --column lost --out my-link.yaml",
        "  linkworthy noise fit trace.csv --html fit.html",
        "  linkworthy noise fit --pictures frames --out my-sensor.yaml --html fit.html"
      })
  int fit(
      @ArgGroup(exclusive = true, multiplicity = "1") Measured measured,
      @Option(
              names = "--column",
              paramLabel = "NAME",
              description = "Column of the fates, by its name in the first line.")
          @Nullable String column,
      @Option(
              names = "--repeated",
              description = "The pictures are frames of one scene, even if they differ much.")
          boolean repeated,
      @Option(names = "--single", description = "Take each picture for itself.") boolean single,
      @Option(
              names = "--out",
              paramLabel = "FILE",
              description = "Model file to write; must not exist.")
          @Nullable Path out,
      @Mixin PageOption html) {
    if (repeated && single) {
      throw new BadInput("--repeated and --single are both given; accepted: one of them");
    }
    if (measured.pictures == null && (repeated || single)) {
      throw new BadInput("--repeated and --single are for --pictures");
    }
    if (measured.pictures != null && column != null) {
      throw new BadInput("--column is for a trace, not for --pictures");
    }
    html.check();
    if (out != null) {
      ModelFile.requireNew(out);
    }
    if (measured.pictures != null) {
      Kind kind = repeated ? Kind.REPEATED : single ? Kind.SINGLE : Kind.TOLD_BY_PICTURES;
      fitPictures(measured.pictures, kind, out, html);
      return Main.DONE;
    }
    return fitTrace(Objects.requireNonNull(measured.trace), column, out, html);
  }

  private void fitPictures(Path folder, Kind kind, @Nullable Path out, PageOption html) {
    PicturesFit fit = PicturesFit.of(folder, kind);
    fit.lines().forEach(surroundings.out()::println);
    if (out != null) {
      ModelFile.write(out, fit.model(ModelFile.id(out)));
      surroundings.out().println("wrote " + out + "; its notes say what was measured");
    }
    html.write(surroundings, () -> FitPage.of(fit, folder, kind));
  }

  private int fitTrace(Path trace, @Nullable String column, @Nullable Path out, PageOption html) {
    LossTrace read = LossTrace.read(trace, Optional.ofNullable(column));
    Optional<String> obstacle = LossFit.obstacle(read);
    if (obstacle.isPresent()) {
      surroundings.out().println(obstacle.get());
      return Main.NO;
    }
    LossFit fit = LossFit.of(read);
    LossFitText.lines(fit).forEach(surroundings.out()::println);
    if (out != null) {
      ModelFile.write(out, ModelFile.of(fit, ModelFile.id(out)));
      surroundings
          .out()
          .println("wrote " + out + "; in a study: noise: " + out + " with loss-rate: [...]");
    }
    html.write(surroundings, () -> FitPage.of(fit, trace, column));
    return Main.DONE;
  }

  /** What is fitted. */
  private static final class Measured {
    @Parameters(paramLabel = "TRACE.csv", description = "Fates of packets.")
    private @Nullable Path trace;

    @Option(names = "--pictures", paramLabel = "DIR", description = "Folder of pictures.")
    private @Nullable Path pictures;
  }

  /** A word, such as the id of a curve; of the content of a file how many lines it has. */
  private static String setting(String text) {
    long lines = text.lines().count();
    return lines > 1 ? lines + " lines" : text.strip();
  }

  /** By name, as in files: those that are on or off as true or false. */
  private static String parameters(NoiseModel model) {
    return model.parameters().entrySet().stream()
        .map(entry -> entry.getKey() + "=" + value(model, entry.getKey(), entry.getValue()))
        .collect(Collectors.joining(", ", "{", "}"));
  }

  private static String value(NoiseModel model, String name, double value) {
    return model.implementation().flags().contains(name)
        ? String.valueOf(value == 1)
        : String.valueOf(value);
  }

  private static String sites(NoiseModel model) {
    return model.actsOn().stream().map(Site::id).collect(Collectors.joining(", "));
  }
}
