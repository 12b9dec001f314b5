package linkworthy.results;

import java.nio.file.Path;
import java.time.Clock;
import java.time.Instant;
import java.time.temporal.ChronoUnit;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Objects;
import java.util.Set;
import java.util.stream.Collectors;
import linkworthy.codec.Confinement;
import linkworthy.codec.PluginFolder;
import linkworthy.corpus.ManifestEntry;
import linkworthy.input.BadInput;
import linkworthy.input.Require;
import linkworthy.noise.NoiseModel;
import linkworthy.study.ImpairmentChoice;
import linkworthy.study.PictureChoice.ManifestFile;
import linkworthy.study.Study;
import linkworthy.study.StudyWriter;
import linkworthy.trial.Plan;
import org.jspecify.annotations.Nullable;
import tools.jackson.core.JacksonException;
import tools.jackson.databind.DeserializationFeature;
import tools.jackson.databind.MapperFeature;
import tools.jackson.databind.PropertyNamingStrategies;
import tools.jackson.databind.json.JsonMapper;

/**
 * {@code run.json}: the circumstances of a run. The only file of a results folder, besides the
 * timings, that differs between machines.
 *
 * @param program always {@link #PROGRAM}
 * @param programVersion version of the program
 * @param study name of the study
 * @param purpose why it was run
 * @param studyFingerprint {@link StudyWriter#fingerprint}
 * @param corpusFingerprint fingerprint of the manifest
 * @param manifest where the manifest was, or null for the shipped pictures
 * @param noiseModels the models in force, in study order, each once
 * @param seed of the study
 * @param javaVersion version of the Java runtime
 * @param javaVendor who built it
 * @param operatingSystem name, version and processor architecture
 * @param start of the run, UTC, whole seconds
 * @param end of the run, or null while it is not finished
 * @param trialsPlanned how many trials the plan has; where replicates may end early, at most so
 *     many until the run is complete, and then as many as it came to
 * @param trialsDone how many are in the record
 * @param complete whether the record has every planned trial and its cells
 * @param pictures the pictures used, with their credits
 * @param plugins the plugin jars that were loaded, in the order of their names
 * @param programs the programs outside this one that codecs run, in study order
 */
public record RunRecord(
    String program,
    String programVersion,
    String study,
    String purpose,
    String studyFingerprint,
    String corpusFingerprint,
    @Nullable String manifest,
    List<ModelUsed> noiseModels,
    long seed,
    String javaVersion,
    String javaVendor,
    String operatingSystem,
    Instant start,
    @Nullable Instant end,
    long trialsPlanned,
    long trialsDone,
    boolean complete,
    List<PictureUsed> pictures,
    List<PluginUsed> plugins,
    List<ProgramUsed> programs) {
  /** Name of the file in a results folder. */
  public static final String FILE = "run.json";

  /** Value of {@link #program}: how the program recognises its own folders. */
  public static final String PROGRAM = "linkworthy";

  private static final JsonMapper JSON =
      IndentedJson.builder()
          .propertyNamingStrategy(PropertyNamingStrategies.SNAKE_CASE)
          .disable(MapperFeature.SORT_PROPERTIES_ALPHABETICALLY)
          .enable(
              DeserializationFeature.FAIL_ON_UNKNOWN_PROPERTIES,
              DeserializationFeature.FAIL_ON_MISSING_CREATOR_PROPERTIES,
              DeserializationFeature.FAIL_ON_NULL_FOR_PRIMITIVES,
              DeserializationFeature.FAIL_ON_TRAILING_TOKENS)
          .build();

  /** A noise model in force. */
  public record ModelUsed(String id, int version, String fingerprint) {}

  /** A jar with codecs of the user's own, or a library of theirs. */
  public record PluginUsed(String jar, String sha256) {}

  /**
   * A program that a codec runs, as the study names it.
   *
   * @param confinement {@link Confinement#id}
   */
  public record ProgramUsed(String codec, String program, String confinement) {}

  /** A picture used, as its manifest announces it. */
  public record PictureUsed(
      String id,
      String set,
      String file,
      int width,
      int height,
      String licence,
      String attribution,
      String source,
      String sha256) {
    /** What a record says of a picture of the manifest. */
    public static PictureUsed of(ManifestEntry entry) {
      return new PictureUsed(
          entry.id(),
          entry.set(),
          entry.file(),
          entry.width(),
          entry.height(),
          entry.licence(),
          entry.attribution(),
          entry.source(),
          entry.sha256());
    }
  }

  /**
   * @throws IllegalArgumentException if this is no record of this program, or its counts contradict
   *     each other
   */
  public RunRecord {
    if (!program.equals(PROGRAM)) {
      throw new IllegalArgumentException("program is '" + program + "'; accepted: " + PROGRAM);
    }
    Require.notBlank(programVersion, "program_version");
    Require.notBlank(study, "study");
    Require.notBlank(purpose, "purpose");
    Require.notBlank(studyFingerprint, "study_fingerprint");
    Require.notBlank(corpusFingerprint, "corpus_fingerprint");
    if (trialsDone < 0 || trialsDone > trialsPlanned) {
      throw new IllegalArgumentException(
          "trials_done is " + trialsDone + "; accepted: 0 to " + trialsPlanned);
    }
    if (complete && (end == null || trialsDone != trialsPlanned)) {
      throw new IllegalArgumentException(
          "complete is true; accepted: true only with an end and every planned trial done");
    }
    noiseModels = List.copyOf(noiseModels);
    pictures = List.copyOf(pictures);
    plugins = List.copyOf(plugins);
    programs = List.copyOf(programs);
  }

  /** The record of a run that begins now, on this machine. */
  public static RunRecord begin(Plan plan, String programVersion, Clock clock) {
    return begin(
        plan.study(),
        programVersion,
        plan.manifest().fingerprint(),
        plan.pictures(),
        plan.trials(),
        clock);
  }

  static RunRecord begin(
      Study study,
      String programVersion,
      String corpusFingerprint,
      List<ManifestEntry> pictures,
      long trialsPlanned,
      Clock clock) {
    ManifestFile manifest = study.pictures().manifest();
    return new RunRecord(
        PROGRAM,
        programVersion,
        study.name(),
        study.purpose(),
        StudyWriter.fingerprint(study),
        corpusFingerprint,
        manifest == null ? null : manifest.file().toAbsolutePath().normalize().toString(),
        models(study),
        study.seed(),
        property("java.version"),
        property("java.vendor"),
        property("os.name") + " " + property("os.version") + " " + property("os.arch"),
        now(clock),
        null,
        trialsPlanned,
        0,
        false,
        pictures.stream().map(PictureUsed::of).toList(),
        List.of(),
        study.codecs().stream()
            .flatMap(
                codec ->
                    codec.codec().programs().stream()
                        .map(
                            p ->
                                new ProgramUsed(
                                    codec.label(), p, Confinement.ofThisMachine().id())))
            .toList());
  }

  /** The same record of a run that has plugins. */
  public RunRecord withPlugins(List<PluginFolder.Jar> jars) {
    return with(
        end,
        trialsDone,
        complete,
        jars.stream().map(jar -> new PluginUsed(jar.name(), jar.sha256())).toList());
  }

  /** The same record at the end of the run, or of a part of it. */
  public RunRecord end(long done, Clock clock) {
    return with(now(clock), done, done == trialsPlanned, plugins);
  }

  /** The same record at the end of a run that has done every trial its plan comes to. */
  public RunRecord complete(long done, Clock clock) {
    return planned(done).end(done, clock);
  }

  /**
   * The same record of a run that goes on with so many trials done.
   *
   * @param now the record of a run that begins now with the same study
   * @param mayEndEarly whether a complete record may have fewer trials than planned at first
   * @throws BadInput if the rest of the rows would not be those of the run that was stopped: it had
   *     another version of the program, other pictures, plugins or another number of trials
   */
  RunRecord goesOn(RunRecord now, long done, boolean mayEndEarly) {
    requireSame("program version", programVersion, now.programVersion);
    requireSame("study fingerprint", studyFingerprint, now.studyFingerprint);
    requireSame("pictures", checksums(), now.checksums());
    requireSame("plugins", plugins.toString(), now.plugins.toString());
    if (!complete || !mayEndEarly) {
      requireSame("number of trials", "" + trialsPlanned, "" + now.trialsPlanned);
    }
    return planned(now.trialsPlanned).with(null, done, false, plugins);
  }

  /** The pictures used, with their checksums. */
  private String checksums() {
    return String.join(", ", pictures.stream().map(p -> p.id() + " " + p.sha256()).toList());
  }

  private static void requireSame(String what, String begun, String now) {
    if (!begun.equals(now)) {
      throw new BadInput(
          "the run was begun with another "
              + what
              + ": "
              + now
              + "; accepted for going on: "
              + begun);
    }
  }

  private RunRecord with(
      @Nullable Instant newEnd, long newDone, boolean newComplete, List<PluginUsed> newPlugins) {
    return new RunRecord(
        program,
        programVersion,
        study,
        purpose,
        studyFingerprint,
        corpusFingerprint,
        manifest,
        noiseModels,
        seed,
        javaVersion,
        javaVendor,
        operatingSystem,
        start,
        newEnd,
        trialsPlanned,
        newDone,
        newComplete,
        pictures,
        newPlugins,
        programs);
  }

  /** The same record, not ended, of a plan that has so many trials. */
  private RunRecord planned(long trials) {
    return new RunRecord(
        program,
        programVersion,
        study,
        purpose,
        studyFingerprint,
        corpusFingerprint,
        manifest,
        noiseModels,
        seed,
        javaVersion,
        javaVendor,
        operatingSystem,
        start,
        null,
        trials,
        0,
        false,
        pictures,
        plugins,
        programs);
  }

  /** Where the manifest was, or null for the shipped pictures. */
  @Nullable Path manifestFile() {
    return manifest == null ? null : Path.of(manifest);
  }

  /** The record as JSON, keys in the order above. */
  public String toJson() {
    return JSON.writeValueAsString(this) + "\n";
  }

  /**
   * Reads a record.
   *
   * @param source names the text in messages
   * @throws BadInput if it is none
   */
  public static RunRecord parse(String source, String text) {
    try {
      RunRecord record = JSON.readValue(text, RunRecord.class);
      if (record == null) {
        throw new BadInput(source + ", line 1: not the record of a run: it is null");
      }
      return record;
    } catch (JacksonException e) {
      int line = e.getLocation() == null ? 1 : Math.max(1, e.getLocation().getLineNr());
      throw new BadInput(source + ", line " + line + ": not the record of a run: " + problem(e), e);
    }
  }

  private static String problem(JacksonException e) {
    if (e.getCause() instanceof IllegalArgumentException own) {
      return String.valueOf(own.getMessage());
    }
    String message = String.valueOf(e.getOriginalMessage());
    if (message.startsWith("Cannot ")) {
      String key =
          e.getPath().stream()
              .map(JacksonException.Reference::getPropertyName)
              .filter(Objects::nonNull)
              .collect(Collectors.joining("."));
      return (key.isEmpty() ? "it" : key) + " is no value of the kind that 'assess' writes there";
    }
    return message.split("[;\n(]", 2)[0].strip();
  }

  /** The noise models of a study, in its order, each once. */
  public static List<ModelUsed> models(Study study) {
    Set<ModelUsed> models = new LinkedHashSet<>();
    for (ImpairmentChoice impairment : study.impairments()) {
      NoiseModel model = impairment.model();
      models.add(new ModelUsed(model.id(), model.version(), model.fingerprint()));
    }
    return List.copyOf(models);
  }

  private static Instant now(Clock clock) {
    return clock.instant().truncatedTo(ChronoUnit.SECONDS);
  }

  private static String property(String name) {
    return System.getProperty(name, "unknown");
  }
}
