package linkworthy.study;

import java.nio.file.Path;
import linkworthy.input.YamlNode;
import linkworthy.link.NodeProfile;
import org.jspecify.annotations.Nullable;

/**
 * Reads the key {@code node} of a study: {@code none}, the id of a shipped profile, the path of a
 * profile file, or a group of keys with {@code profile} (one of these, or the profile's own keys)
 * and {@code interval-s}.
 */
final class NodeReader {
  private static final String PROFILE = "profile";
  private static final String INTERVAL = "interval-s";

  private NodeReader() {}

  /**
   * @param usualInterval seconds between pictures where the study does not say
   * @throws linkworthy.input.BadInput if it cannot be used; one line with file, line and key
   */
  static @Nullable NodeChoice read(YamlNode node, YamlNode usualInterval, Path baseFolder) {
    if (!node.isMapping()) {
      return node.text().equals(StudyWriter.NONE)
          ? null
          : new NodeChoice(profile(node, baseFolder), interval(usualInterval));
    }
    YamlNode profile = node.get(PROFILE);
    return new NodeChoice(
        profile.isMapping() ? NodeProfile.parse(profile) : profile(profile, baseFolder),
        interval(node.find(INTERVAL).orElse(usualInterval)));
  }

  private static NodeProfile profile(YamlNode node, Path baseFolder) {
    String written = node.text();
    if (StudyWriter.isModelPath(written)) {
      return NodeProfile.read(baseFolder.resolve(written).normalize());
    }
    if (!NodeProfile.shipped().contains(written)) {
      String unused = node.oneOf(NodeProfile.shipped());
    }
    return NodeProfile.find(written);
  }

  private static double interval(YamlNode node) {
    return StudyKeys.INTERVAL.read(node);
  }
}
