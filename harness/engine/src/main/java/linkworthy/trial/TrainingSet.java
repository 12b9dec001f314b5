package linkworthy.trial;

import java.nio.charset.StandardCharsets;
import java.util.HashSet;
import java.util.List;
import java.util.Set;
import linkworthy.codec.Training;
import linkworthy.corpus.Manifest;
import linkworthy.corpus.ManifestEntry;
import linkworthy.input.BadInput;
import linkworthy.study.Study;

/** The pictures of a study that codecs learn from; never one that is tested. */
final class TrainingSet {
  private final Manifest manifest;
  private final List<ManifestEntry> entries;

  private TrainingSet(Manifest manifest, List<ManifestEntry> entries) {
    this.manifest = manifest;
    this.entries = entries;
  }

  /**
   * @param tested the pictures that the study tests
   * @throws BadInput if a picture, or a copy of it under another id, would be in both sets
   */
  static TrainingSet of(Study study, Manifest manifest, List<ManifestEntry> tested) {
    List<String> words = study.pictures().train();
    List<ManifestEntry> entries = words.isEmpty() ? List.of() : manifest.select(words);
    Set<String> contents = new HashSet<>();
    tested.forEach(entry -> contents.add(entry.sha256()));
    for (ManifestEntry entry : entries) {
      if (contents.contains(entry.sha256())) {
        throw new BadInput(
            "picture '"
                + entry.id()
                + "' is in pictures.train and tested by pictures.select; accepted: each picture in"
                + " one of the two");
      }
    }
    return new TrainingSet(manifest, entries);
  }

  /**
   * The study with its codecs trained.
   *
   * @throws BadInput if a codec cannot be trained on these pictures
   */
  Study train(Study study) {
    if (entries.isEmpty()
        || study.codecs().stream().noneMatch(choice -> choice.codec().needsTraining())) {
      return study;
    }
    Training training =
        new Training(
            entries.size(),
            index -> study.pictures().load(manifest, entries.get(index)),
            fingerprint());
    return study.withCodecs(
        study.codecs().stream().map(choice -> choice.trainedOn(training)).toList());
  }

  /** SHA-256 over the files' own; their longest side is a part of the trial's key by itself. */
  private String fingerprint() {
    String lines = String.join("\n", entries.stream().map(ManifestEntry::sha256).toList());
    return Manifest.sha256(lines.getBytes(StandardCharsets.UTF_8));
  }
}
