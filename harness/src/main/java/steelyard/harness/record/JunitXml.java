package steelyard.harness.record;

import java.io.StringWriter;
import javax.xml.stream.XMLOutputFactory;
import javax.xml.stream.XMLStreamException;
import javax.xml.stream.XMLStreamWriter;

/** {@code junit.xml}: one case an expectation, and one for the play's fitness; no time stamps. */
final class JunitXml {
    private JunitXml() {}

    static String text(String drill, Verdict verdict) {
        StringWriter text = new StringWriter();
        try {
            XMLStreamWriter xml = XMLOutputFactory.newFactory().createXMLStreamWriter(text);
            xml.writeStartDocument("UTF-8", "1.0");
            suite(xml, clean(drill), verdict);
            xml.writeEndDocument();
            xml.close();
        } catch (XMLStreamException e) {
            throw new IllegalStateException("a text in memory cannot be written", e);
        }
        return text.append('\n').toString();
    }

    private static void suite(XMLStreamWriter xml, String drill, Verdict verdict) throws XMLStreamException {
        long missed =
                verdict.expectations().stream().filter(each -> !each.met()).count();
        xml.writeCharacters("\n");
        xml.writeStartElement("testsuite");
        xml.writeAttribute("name", drill);
        xml.writeAttribute("tests", String.valueOf(verdict.expectations().size() + 1));
        xml.writeAttribute("failures", String.valueOf(missed + (verdict.fit() ? 0 : 1)));
        xml.writeAttribute("errors", "0");
        xml.writeAttribute("skipped", "0");
        for (Finding finding : verdict.expectations()) {
            String name = finding.text() + ": " + finding.boundText();
            String note = finding.note() == null ? "" : " (" + finding.note() + ")";
            String failure = "bound " + finding.boundText() + ", measured " + finding.measured() + note;
            testcase(xml, drill, name, finding.met(), failure);
        }
        testcase(xml, drill, "fit to judge", verdict.fit(), unfit(verdict));
        xml.writeCharacters("\n");
        xml.writeEndElement();
    }

    private static void testcase(XMLStreamWriter xml, String drill, String name, boolean ok, String failure)
            throws XMLStreamException {
        xml.writeCharacters("\n  ");
        xml.writeStartElement("testcase");
        xml.writeAttribute("classname", "steelyard." + drill);
        xml.writeAttribute("name", clean(name));
        if (!ok) {
            xml.writeEmptyElement("failure");
            xml.writeAttribute("message", clean(failure));
        }
        xml.writeEndElement();
    }

    private static String unfit(Verdict verdict) {
        StringBuilder text = new StringBuilder();
        for (SelfCheck check : verdict.checks()) {
            if (!check.ok()) {
                text.append(text.length() == 0 ? "" : "; ")
                        .append(check.check())
                        .append(": ")
                        .append(check.text());
            }
        }
        return text.toString();
    }

    /** XML 1.0 has no place for most control characters, escaped or not. */
    private static String clean(String text) {
        return text.replaceAll("[\\p{Cntrl}\\uFFFE\\uFFFF]", " ");
    }
}
