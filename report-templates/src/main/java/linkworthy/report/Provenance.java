package linkworthy.report;

import java.util.List;

/**
 * Where the figures came from.
 *
 * @param settings every effective setting of the study, in the study's order
 */
public record Provenance(
    Program program,
    Fingerprints fingerprints,
    List<NoiseModel> noiseModels,
    long seed,
    Run run,
    List<Fact> settings) {

  public Provenance {
    noiseModels = List.copyOf(noiseModels);
    settings = List.copyOf(settings);
  }

  /** What ran: the version of the program, the Java runtime and the operating system. */
  public record Program(String version, String java, String operatingSystem) {}

  /** Hashes of what went in. */
  public record Fingerprints(String study, String corpus) {}

  /** A noise model with the version and the hash of its definition. */
  public record NoiseModel(String name, String version, String fingerprint) {}

  /**
   * When it ran and how far it came.
   *
   * @param start as recorded, ISO 8601
   * @param end as recorded, ISO 8601
   * @param planned trials of the plan
   * @param recorded trials in the record
   */
  public record Run(String start, String end, long planned, long recorded) {}
}
