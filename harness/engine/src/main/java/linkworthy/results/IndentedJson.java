package linkworthy.results;

import tools.jackson.core.util.DefaultIndenter;
import tools.jackson.core.util.DefaultPrettyPrinter;
import tools.jackson.databind.SerializationFeature;
import tools.jackson.databind.json.JsonMapper;

/** How the program writes JSON: two spaces a level, and LF on every system. */
public final class IndentedJson {
  private IndentedJson() {}

  /** A mapper to be, which writes that way. */
  public static JsonMapper.Builder builder() {
    DefaultIndenter indenter = new DefaultIndenter("  ", "\n");
    return JsonMapper.builder()
        .enable(SerializationFeature.INDENT_OUTPUT)
        .defaultPrettyPrinter(
            new DefaultPrettyPrinter().withObjectIndenter(indenter).withArrayIndenter(indenter));
  }
}
