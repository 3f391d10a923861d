package steelyard.harness.record;

import java.io.StringWriter;
import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import javax.xml.stream.XMLOutputFactory;
import javax.xml.stream.XMLStreamException;
import javax.xml.stream.XMLStreamWriter;

/** {@code junit.xml}: one case an expectation, and one for the play's fitness; no time stamps. */
public final class JunitXml {
    private JunitXml() {}

    /**
     * A case of the suite.
     *
     * @param skipped whether it was never judged; not ok then
     * @param failure what to say when it is not ok
     */
    public record Case(String name, boolean ok, boolean skipped, String failure) {
        /** A case that was judged. */
        public Case(String name, boolean ok, String failure) {
            this(name, ok, false, failure);
        }
    }

    /** The file's text. */
    public static String text(String drill, List<Case> cases) {
        return text(drill, Map.of(), cases);
    }

    private static String text(String drill, Map<String, String> properties, List<Case> cases) {
        StringWriter text = new StringWriter();
        try {
            XMLStreamWriter xml = XMLOutputFactory.newFactory().createXMLStreamWriter(text);
            xml.writeStartDocument("UTF-8", "1.0");
            suite(xml, clean(drill), properties, cases);
            xml.writeEndDocument();
            xml.close();
        } catch (XMLStreamException e) {
            throw new IllegalStateException("a text in memory cannot be written", e);
        }
        return text.append('\n').toString();
    }

    static String text(String drill, Verdict verdict) {
        List<Case> cases = new ArrayList<>();
        for (Finding finding : verdict.expectations()) {
            String note = finding.note() == null ? "" : " (" + finding.note() + ")";
            String measured = "bound " + finding.boundText() + ", measured " + finding.measured() + note;
            String unfit = verdict.fit() ? "" : "the play is unfit to judge; ";
            String failure = finding.reached() ? unfit + measured : "not reached";
            cases.add(
                    new Case(finding.text() + ": " + finding.boundText(), finding.met(), !finding.reached(), failure));
        }
        cases.add(fitness(verdict.fit(), verdict.checks()));
        return text(drill, Map.of(RunJson.HAND_CUES, String.valueOf(verdict.handCues())), cases);
    }

    /** The case that says whether it is fit to judge. */
    public static Case fitness(boolean fit, List<SelfCheck> checks) {
        return new Case("fit to judge", fit, "unfit to judge: " + unfit(checks));
    }

    private static void suite(XMLStreamWriter xml, String drill, Map<String, String> properties, List<Case> cases)
            throws XMLStreamException {
        long skipped = cases.stream().filter(Case::skipped).count();
        long failures = cases.stream().filter(each -> !each.ok()).count() - skipped;
        xml.writeCharacters("\n");
        xml.writeStartElement("testsuite");
        xml.writeAttribute("name", drill);
        xml.writeAttribute("tests", String.valueOf(cases.size()));
        xml.writeAttribute("failures", String.valueOf(failures));
        xml.writeAttribute("errors", "0");
        xml.writeAttribute("skipped", String.valueOf(skipped));
        properties(xml, properties);
        for (Case each : cases) {
            testcase(xml, drill, each);
        }
        xml.writeCharacters("\n");
        xml.writeEndElement();
    }

    private static void properties(XMLStreamWriter xml, Map<String, String> properties) throws XMLStreamException {
        if (properties.isEmpty()) {
            return;
        }
        xml.writeCharacters("\n  ");
        xml.writeStartElement("properties");
        for (Map.Entry<String, String> each : properties.entrySet()) {
            xml.writeEmptyElement("property");
            xml.writeAttribute("name", each.getKey());
            xml.writeAttribute("value", each.getValue());
        }
        xml.writeEndElement();
    }

    private static void testcase(XMLStreamWriter xml, String drill, Case each) throws XMLStreamException {
        xml.writeCharacters("\n  ");
        xml.writeStartElement("testcase");
        xml.writeAttribute("classname", "steelyard." + drill);
        xml.writeAttribute("name", clean(each.name()));
        if (!each.ok()) {
            xml.writeEmptyElement(each.skipped() ? "skipped" : "failure");
            xml.writeAttribute("message", clean(each.failure()));
        }
        xml.writeEndElement();
    }

    private static String unfit(List<SelfCheck> checks) {
        StringBuilder text = new StringBuilder();
        for (SelfCheck check : checks) {
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
