package linkworthy.app;

import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.Base64;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.regex.Pattern;
import linkworthy.report.HandbookPage;
import linkworthy.report.ReportRenderer;
import org.commonmark.Extension;
import org.commonmark.ext.gfm.tables.TablesExtension;
import org.commonmark.ext.heading.anchor.HeadingAnchorExtension;
import org.commonmark.node.AbstractVisitor;
import org.commonmark.node.Code;
import org.commonmark.node.Heading;
import org.commonmark.node.Image;
import org.commonmark.node.Link;
import org.commonmark.node.Node;
import org.commonmark.node.Text;
import org.commonmark.parser.Parser;
import org.commonmark.renderer.html.HtmlRenderer;

/**
 * The handbook as pages of HTML, made of its Markdown. The start page says by its links which pages
 * there are, and in which order. Links to files outside the handbook become text, as a rendered
 * handbook stands alone.
 */
final class Handbook {
  /** The start page. */
  static final String START = "index.html";

  private static final String README = "README.md";
  private static final String FOLDER = "handbook/";
  private static final Pattern PAGE = Pattern.compile("([a-z0-9-]+)\\.md(#.*)?");
  private static final List<Extension> EXTENSIONS =
      List.of(TablesExtension.create(), HeadingAnchorExtension.create());
  private static final Parser PARSER = Parser.builder().extensions(EXTENSIONS).build();
  private static final HtmlRenderer RENDERER =
      HtmlRenderer.builder().extensions(EXTENSIONS).escapeHtml(true).sanitizeUrls(false).build();

  private final Source source;
  private final Map<String, Node> pages = new LinkedHashMap<>();

  /** Where the files of the handbook are. */
  interface Source {
    byte[] bytes(String name);
  }

  private Handbook(Source source) {
    this.source = source;
  }

  /** The HTML of every page by its file's name, the start page first. */
  static Map<String, String> pages(Source source) {
    Handbook handbook = new Handbook(source);
    handbook.read(README);
    List<String> linked = new ArrayList<>();
    handbook
        .page(README)
        .accept(
            new AbstractVisitor() {
              @Override
              public void visit(Link link) {
                var page = PAGE.matcher(link.getDestination());
                if (page.matches()) {
                  linked.add(page.group(1) + ".md");
                }
              }
            });
    linked.forEach(handbook::read);
    Map<String, String> html = new LinkedHashMap<>();
    handbook.pages.forEach((name, node) -> html.put(file(name), handbook.html(name, node)));
    return html;
  }

  private void read(String name) {
    pages.computeIfAbsent(
        name, n -> PARSER.parse(new String(source.bytes(FOLDER + n), StandardCharsets.UTF_8)));
  }

  private Node page(String name) {
    Node page = pages.get(name);
    if (page == null) {
      throw new IllegalStateException("the handbook has no page " + name);
    }
    return page;
  }

  private static String file(String name) {
    return name.equals(README) ? START : name.replace(".md", ".html");
  }

  private String html(String name, Node node) {
    node.accept(new Links());
    String body =
        RENDERER
            .render(node)
            .replace(
                "<table>",
                "<div class=\"scroll\" tabindex=\"0\" role=\"region\" aria-label=\"Table\"><table"
                    + " class=\"list\">")
            .replace("</table>", "</table></div>")
            .replace("<pre>", "<pre tabindex=\"0\">");
    List<HandbookPage.Entry> entries = new ArrayList<>();
    pages.forEach(
        (other, page) ->
            entries.add(new HandbookPage.Entry(title(page), file(other), other.equals(name))));
    return new ReportRenderer()
        .render(new HandbookPage(title(node), entries, body, Version.text()));
  }

  /** The text of the first heading. */
  private static String title(Node page) {
    StringBuilder title = new StringBuilder();
    if (page.getFirstChild() instanceof Heading heading) {
      heading.accept(
          new AbstractVisitor() {
            @Override
            public void visit(Text text) {
              title.append(text.getLiteral());
            }
          });
    }
    return title.toString();
  }

  /** Makes links lead to pages of HTML, and pictures stand in the page. */
  private final class Links extends AbstractVisitor {
    @Override
    public void visit(Link link) {
      visitChildren(link);
      String to = link.getDestination();
      var page = PAGE.matcher(to);
      if (to.equals(README) || (page.matches() && pages.containsKey(page.group(1) + ".md"))) {
        link.setDestination(
            to.equals(README)
                ? START
                : page.group(1) + ".html" + (page.group(2) == null ? "" : page.group(2)));
      } else if (!to.startsWith("#") && !to.startsWith("https://")) {
        link.insertBefore(new Text(""));
        Node child = link.getFirstChild();
        while (child != null) {
          Node next = child.getNext();
          link.insertBefore(child);
          child = next;
        }
        link.insertBefore(new Text(" ("));
        link.insertBefore(new Code(to.replaceAll("^(\\.\\./)+", "")));
        link.insertBefore(new Text(")"));
        link.unlink();
      }
    }

    @Override
    public void visit(Image image) {
      visitChildren(image);
      image.setDestination(
          "data:image/png;base64,"
              + Base64.getEncoder().encodeToString(source.bytes(FOLDER + image.getDestination())));
    }
  }
}
