package linkworthy.app;

import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.file.Files;
import java.nio.file.Path;

/** A study of every kind of impairment and transform that runs in less than a second. */
final class SmallStudy {
  static final String TEXT =
      """
      name: small
      purpose: What does a small study show?
      seed: 7
      pictures: {select: [canyon, cat], longest-side: 32}
      impairments:
        - noise: gaussian
          snr-db: [20, 10]
        - noise: salt-and-pepper
          density: [0.05]
        - noise: burst-loss
          acts-on: packets
          mean-burst: 4
          loss-rate: [0.1]
      codecs:
        - transform: pca
          over: rows
          keep: [2, 8]
        - transform: pca
          over: blocks
          share: 0.9
        - transform: dct
          keep: [4]
          step: none
        - transform: mean
          step: 16
      replicates: 2
      """;

  private SmallStudy() {}

  /** Writes the study into a folder and returns its path. */
  static Path in(Path folder) {
    return write(folder, TEXT);
  }

  static Path write(Path folder, String text) {
    try {
      return Files.writeString(folder.resolve("study.yaml"), text);
    } catch (IOException e) {
      throw new UncheckedIOException(e);
    }
  }
}
