package linkworthy.codec;

import java.util.Optional;
import linkworthy.input.KeyGroup;

/** A kind of codec, found by its id through {@link java.util.ServiceLoader}. */
public interface CodecFamily extends CodecReader {
  /** Stable id; a study names it with its key, as in {@code transform: pca}. */
  String id();

  /**
   * What an entry may hold besides {@code protect}; empty for a family that checks its entries by
   * itself.
   */
  default Optional<KeyGroup> keys() {
    return Optional.empty();
  }

  /** Help for the command {@code codecs}: parameters and what the codec costs. */
  String help();
}
