package linkworthy.report;

import java.io.IOException;
import java.io.StringReader;
import java.util.ArrayList;
import java.util.List;
import javax.xml.parsers.DocumentBuilderFactory;
import javax.xml.parsers.ParserConfigurationException;
import javax.xml.xpath.XPathConstants;
import javax.xml.xpath.XPathExpressionException;
import javax.xml.xpath.XPathFactory;
import org.w3c.dom.Document;
import org.w3c.dom.NodeList;
import org.xml.sax.InputSource;
import org.xml.sax.SAXException;

/** A page read back with an XML parser, which also shows that it is well-formed. */
final class RenderedPage {
  private final Document document;

  RenderedPage(String html) {
    try {
      document =
          DocumentBuilderFactory.newInstance()
              .newDocumentBuilder()
              .parse(new InputSource(new StringReader(html)));
    } catch (SAXException | IOException | ParserConfigurationException e) {
      throw new AssertionError("the page is not well-formed", e);
    }
  }

  static RenderedPage of(ReportPage page) {
    return new RenderedPage(new ReportRenderer().render(page));
  }

  /** The text of every node that a path finds, white space collapsed. */
  List<String> texts(String path) {
    try {
      NodeList nodes =
          (NodeList)
              XPathFactory.newInstance()
                  .newXPath()
                  .evaluate(path, document, XPathConstants.NODESET);
      List<String> texts = new ArrayList<>();
      for (int i = 0; i < nodes.getLength(); i++) {
        texts.add(nodes.item(i).getTextContent().strip().replaceAll("\\s+", " "));
      }
      return texts;
    } catch (XPathExpressionException e) {
      throw new AssertionError(path, e);
    }
  }

  String text(String path) {
    return String.join(" | ", texts(path));
  }
}
