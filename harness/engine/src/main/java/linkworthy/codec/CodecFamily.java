package linkworthy.codec;

import java.util.List;
import linkworthy.input.BadInput;
import linkworthy.input.YamlNode;
import linkworthy.link.Link;

/** A kind of codec, found by its id through {@link java.util.ServiceLoader}. */
public interface CodecFamily {
  /** Stable id; a study names it with its key, as in {@code transform: pca}. */
  String id();

  /** Help for the command {@code codecs}: parameters and what the codec costs. */
  String help();

  /**
   * Reads one entry of a study's {@code codecs} list; a list where one value is expected means one
   * codec for each.
   *
   * @throws BadInput if the entry is wrong
   */
  List<Codec> read(YamlNode entry, Link link);
}
