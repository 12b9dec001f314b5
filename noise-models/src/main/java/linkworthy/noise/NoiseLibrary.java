package linkworthy.noise;

import java.io.IOException;
import java.io.InputStream;
import java.nio.charset.StandardCharsets;
import java.util.List;
import linkworthy.input.BadInput;
import linkworthy.input.Spelling;
import linkworthy.input.Unavailable;
import linkworthy.input.YamlNode;

/**
 * The noise models shipped with the program: the files of {@code noise-models/library}, which their
 * {@code index.txt} lists, one id a line.
 */
public final class NoiseLibrary {
  private static final String FOLDER = "library/";

  private NoiseLibrary() {}

  /** The shipped models, in the order of the index. */
  public static List<NoiseModel> shipped() {
    return text("index.txt")
        .lines()
        .map(
            id ->
                NoiseModel.parse(
                    YamlNode.parse("library/" + id + ".yaml", text(id + ".yaml")),
                    NoiseLibrary::text))
        .toList();
  }

  /**
   * The shipped model with an id.
   *
   * @throws BadInput if there is none; it lists what exists and the nearest spelling
   */
  public static NoiseModel find(String id) {
    List<NoiseModel> models = shipped();
    return models.stream()
        .filter(model -> model.id().equals(id))
        .findFirst()
        .orElseThrow(
            () ->
                new BadInput(
                    "no noise model '"
                        + id
                        + "'; "
                        + Spelling.hint(id, models.stream().map(NoiseModel::id).toList())));
  }

  private static String text(String name) {
    try (InputStream in = NoiseLibrary.class.getResourceAsStream(FOLDER + name)) {
      if (in == null) {
        throw new IllegalStateException("the program lacks its noise model file " + name);
      }
      return new String(in.readAllBytes(), StandardCharsets.UTF_8);
    } catch (IOException e) {
      throw new Unavailable("cannot read the noise model file " + name + ": " + e.getMessage(), e);
    }
  }
}
