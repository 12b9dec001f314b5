package linkworthy.codec;

/** A kind of codec, found by its id through {@link java.util.ServiceLoader}. */
public interface CodecFamily extends CodecReader {
  /** Stable id; a study names it with its key, as in {@code transform: pca}. */
  String id();

  /** Help for the command {@code codecs}: parameters and what the codec costs. */
  String help();
}
