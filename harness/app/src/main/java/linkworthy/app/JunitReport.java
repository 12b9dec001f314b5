package linkworthy.app;

import java.io.StringWriter;
import javax.xml.stream.XMLOutputFactory;
import javax.xml.stream.XMLStreamException;
import javax.xml.stream.XMLStreamWriter;
import linkworthy.decision.CellDrift;
import linkworthy.decision.Drift;
import linkworthy.decision.Movement;

/**
 * A comparison as JUnit XML, the form that build servers read: a test case a cell, a failure where
 * it moved for the worse beyond the tolerance; other moves and what is undecided are notes.
 */
final class JunitReport {
  private JunitReport() {}

  static String of(Drift drift, String study) {
    StringWriter text = new StringWriter();
    try {
      XMLStreamWriter xml = XMLOutputFactory.newDefaultFactory().createXMLStreamWriter(text);
      xml.writeStartDocument("UTF-8", "1.0");
      line(xml);
      xml.writeStartElement("testsuite");
      xml.writeAttribute("name", "drift of " + printable(study));
      xml.writeAttribute("tests", Integer.toString(drift.cells().size()));
      xml.writeAttribute("failures", Long.toString(drift.worse()));
      xml.writeAttribute("errors", "0");
      xml.writeAttribute("skipped", "0");
      line(xml);
      for (CellDrift cell : drift.cells()) {
        write(xml, cell);
      }
      xml.writeEndElement();
      line(xml);
      xml.writeEndDocument();
    } catch (XMLStreamException e) {
      throw new IllegalStateException("writing to memory cannot fail", e);
    }
    return text.toString();
  }

  private static void write(XMLStreamWriter xml, CellDrift cell) throws XMLStreamException {
    xml.writeStartElement("testcase");
    xml.writeAttribute("classname", printable(DriftWords.condition(cell.key())));
    xml.writeAttribute("name", printable(cell.key().codec()));
    String note =
        cell.verdict()
            + ": mean PSNR changed by "
            + DriftWords.signed(cell.difference().estimate(), 3)
            + " dB, half-width of its 95 % interval "
            + DriftWords.signed(cell.difference().halfWidth(), 3).replace("+", "")
            + " dB";
    if (cell.isWorse()) {
      xml.writeStartElement("failure");
      xml.writeAttribute("message", note);
      xml.writeEndElement();
    } else if (cell.verdict() != Movement.SAME) {
      xml.writeStartElement("system-out");
      xml.writeCharacters(note);
      xml.writeEndElement();
    }
    xml.writeEndElement();
    line(xml);
  }

  private static void line(XMLStreamWriter xml) throws XMLStreamException {
    xml.writeCharacters("\n");
  }

  /** Characters that no XML file may hold are replaced by U+FFFD. */
  private static String printable(String text) {
    StringBuilder printable = new StringBuilder();
    text.codePoints()
        .map(
            c -> {
              boolean control = c < 0x20 || (c >= 0x7F && c <= 0x9F);
              boolean none = (c >= 0xD800 && c <= 0xDFFF) || (c & 0xFFFE) == 0xFFFE;
              return control || none ? 0xFFFD : c;
            })
        .forEach(printable::appendCodePoint);
    return printable.toString();
  }
}
