package linkworthy.report;

import java.io.IOException;
import java.io.InputStream;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import java.security.MessageDigest;
import java.security.NoSuchAlgorithmException;
import java.util.Base64;
import java.util.Locale;
import java.util.regex.Pattern;
import org.thymeleaf.TemplateEngine;
import org.thymeleaf.context.Context;
import org.thymeleaf.templatemode.TemplateMode;
import org.thymeleaf.templateresolver.ClassLoaderTemplateResolver;

/**
 * Renders a page model as one self-contained HTML file, which is also well-formed XML. The file
 * loads nothing: its content security policy admits only its own style sheet and its own script, by
 * hash, and pictures that stand in it. It says all that it says without its script. The same model
 * gives the same text under every locale. May be used by several threads.
 */
public final class ReportRenderer {
  private static final String FOLDER = "linkworthy/report/";

  private static final int LONGEST_HEAD = 80;

  private static final Pattern REFERENCE = Pattern.compile("&#(x[0-9a-f]{1,6}|[0-9]{1,7});");

  private final TemplateEngine engine = new TemplateEngine();
  private final String style = resource("report.css").replace("\r", "");

  /** For all pages but reports and shortlists. */
  private final String further = style + resource("pages.css").replace("\r", "");

  /** A page is XML as well, where less-than signs need a fence. */
  private final String script = "//<![CDATA[\n" + resource("report.js").replace("\r", "") + "//]]>";

  public ReportRenderer() {
    ClassLoaderTemplateResolver resolver =
        new ClassLoaderTemplateResolver(ReportRenderer.class.getClassLoader());
    resolver.setPrefix(FOLDER);
    resolver.setTemplateMode(TemplateMode.HTML);
    resolver.setCharacterEncoding(StandardCharsets.UTF_8.name());
    engine.setTemplateResolver(resolver);
  }

  /**
   * The page as HTML text, to be written as UTF-8. Characters that no HTML file may hold, and those
   * that turn the direction of the text after them, are replaced by U+FFFD.
   *
   * @throws IllegalArgumentException if two figures are of one codec in one condition
   */
  public String render(ReportPage page) {
    Context context = context(style, page.title());
    context.setVariable("page", page);
    context.setVariable("view", ReportView.of(page));
    return process("report.html", context);
  }

  /** The answer to one question as HTML text, under the same rules. */
  public String render(ComparisonPage page) {
    Context context = context(further, page.title());
    context.setVariable("page", page);
    context.setVariable("plots", TrendPlot.of(page));
    return process("comparison.html", context);
  }

  /** A shortlist as HTML text, in the manner of the report. */
  public String render(ShortlistPage page) {
    Context context = context(style, page.title());
    context.setVariable("page", page);
    return process("shortlist.html", context);
  }

  /** A start page over runs as HTML text, under the same rules. */
  public String render(IndexPage page) {
    Context context = context(further, page.title());
    context.setVariable("page", page);
    return process("index.html", context);
  }

  /** A page of the handbook as HTML text, without a script; its content is taken as it is. */
  public String render(HandbookPage page) {
    Context context = new Context(Locale.ROOT);
    setStyle(context, further, page.title(), "");
    context.setVariable("page", page);
    return process("handbook.html", context);
  }

  private String process(String template, Context context) {
    return printable(engine.process(template, context));
  }

  private Context context(String sheet, String title) {
    Context context = new Context(Locale.ROOT);
    setStyle(context, sheet, title, "script-src '" + hash(script) + "'; ");
    context.setVariable("script", script);
    return context;
  }

  private void setStyle(Context context, String sheet, String title, String scripts) {
    String style = sheet + pageHeads(title);
    context.setVariable("style", style);
    context.setVariable(
        "policy",
        "default-src 'none'; style-src '"
            + hash(style)
            + "'; "
            + scripts
            + "img-src data:; base-uri 'none'; form-action 'none'");
  }

  /** What stands in the margins of a printed page: the title, and the page of how many. */
  private static String pageHeads(String title) {
    StringBuilder text = new StringBuilder();
    title
        .codePoints()
        .limit(LONGEST_HEAD)
        .map(c -> isPrintable(c) ? c : 0xFFFD)
        .forEach(
            c ->
                text.append(
                    Character.isLetterOrDigit(c) && c < 0x80
                        ? Character.toString(c)
                        : "\\" + Integer.toHexString(c) + " "));
    return "@page { @top-left { content: \""
        + text
        + "\"; } @top-right { content: counter(page) \" / \" counter(pages); } }\n";
  }

  /** The template engine writes some characters as references, so those are looked through too. */
  private static String printable(String html) {
    String text =
        REFERENCE
            .matcher(html)
            .replaceAll(match -> isPrintable(codePoint(match.group(1))) ? match.group() : "\ufffd");
    StringBuilder printable = new StringBuilder(text.length());
    text.codePoints()
        .filter(c -> c != '\r')
        .map(c -> isPrintable(c) ? c : 0xFFFD)
        .forEach(printable::appendCodePoint);
    return printable.toString();
  }

  private static int codePoint(String number) {
    return number.startsWith("x")
        ? Integer.parseInt(number.substring(1), 16)
        : Integer.parseInt(number);
  }

  private static boolean isPrintable(int c) {
    boolean control = (c < 0x20 && c != '\t' && c != '\n' && c != '\r') || (c >= 0x7F && c <= 0x9F);
    boolean override = (c >= 0x202A && c <= 0x202E) || (c >= 0x2066 && c <= 0x2069);
    boolean surrogate = c >= 0xD800 && c <= 0xDFFF;
    return !control && !override && !surrogate && (c & 0xFFFE) != 0xFFFE;
  }

  private static String hash(String text) {
    try {
      byte[] digest =
          MessageDigest.getInstance("SHA-256").digest(text.getBytes(StandardCharsets.UTF_8));
      return "sha256-" + Base64.getEncoder().encodeToString(digest);
    } catch (NoSuchAlgorithmException e) {
      throw new IllegalStateException("every Java runtime has SHA-256", e);
    }
  }

  private static String resource(String name) {
    try (InputStream in =
        ReportRenderer.class.getClassLoader().getResourceAsStream(FOLDER + name)) {
      if (in == null) {
        throw new IllegalStateException(FOLDER + name + " is missing from the jar");
      }
      return new String(in.readAllBytes(), StandardCharsets.UTF_8);
    } catch (IOException e) {
      throw new UncheckedIOException(e);
    }
  }
}
