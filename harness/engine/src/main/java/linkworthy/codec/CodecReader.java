package linkworthy.codec;

import java.util.List;
import linkworthy.input.BadInput;
import linkworthy.input.YamlNode;
import linkworthy.link.Link;

/** Makes codecs of what a study says. */
public interface CodecReader {
  /**
   * Reads one entry of a study's {@code codecs} list; a list where one value is expected means one
   * codec for each.
   *
   * @throws BadInput if the entry is wrong
   */
  List<Codec> read(YamlNode entry, Link link);
}
