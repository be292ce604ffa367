package backcone.cli;

import backcone.engine.answers.DriveAnswer;
import backcone.engine.answers.RequirementAnswer;
import backcone.engine.answers.State;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.diagnostics.Severity;
import java.io.IOException;
import java.io.PrintWriter;
import java.io.StringWriter;
import java.util.List;
import javax.xml.stream.XMLOutputFactory;
import javax.xml.stream.XMLStreamException;
import javax.xml.stream.XMLStreamWriter;

/** Requirements as test cases in the JUnit XML form that CI servers read: one suite per drive, one more per wrong text. */
final class JunitReport implements Report {
    private final PrintWriter out;
    private int suites;

    JunitReport(PrintWriter out) {
        this.out = out;
        out.println("<?xml version=\"1.0\" encoding=\"UTF-8\"?>");
        out.println("<testsuites name=\"backcone\">");
    }

    @Override
    public void file(Checked c) throws IOException {
        StringWriter text = new StringWriter();
        try {
            XMLStreamWriter x = XMLOutputFactory.newDefaultFactory().createXMLStreamWriter(text);
            List<Diagnostic> wrong = c.diagnostics().stream()
                    .filter(d -> d.severity() == Severity.ERROR && !Checked.aboutStates(d))
                    .toList();
            if (!wrong.isEmpty() || c.fault() != null) {
                x.writeStartElement("testsuite");
                x.writeAttribute("name", c.shown());
                x.writeAttribute("tests", "1");
                x.writeAttribute("failures", "0");
                x.writeAttribute("errors", "1");
                x.writeStartElement("testcase");
                x.writeAttribute("classname", c.shown());
                x.writeAttribute("name", "text");
                x.writeStartElement("error");
                x.writeAttribute(
                        "message",
                        wrong.isEmpty()
                                ? String.valueOf(c.fault())
                                : clean(wrong.get(0).message()));
                StringBuilder all = new StringBuilder();
                for (Diagnostic d : wrong) {
                    all.append(c.shown(d.file()))
                            .append(':')
                            .append(c.places(d.file()).at(d.span().start()))
                            .append(' ')
                            .append(d.message())
                            .append(" [")
                            .append(d.code().id())
                            .append("]\n");
                }
                x.writeCharacters(clean(all.toString()));
                x.writeEndElement();
                x.writeEndElement();
                x.writeEndElement();
                x.writeCharacters("\n");
                suites++;
            }
            for (DriveAnswer d : c.drives()) {
                drive(x, c, d);
            }
            x.flush();
        } catch (XMLStreamException e) {
            throw new IOException(e);
        }
        out.print(text);
    }

    private void drive(XMLStreamWriter x, Checked c, DriveAnswer d) throws XMLStreamException {
        suites++;
        int failures = 0;
        int skipped = 0;
        for (RequirementAnswer r : d.requirements()) {
            failures += r.state() == State.SHORT || r.state() == State.OUTSIDE ? 1 : 0;
            skipped += r.state() == State.OPEN ? 1 : 0;
        }
        x.writeStartElement("testsuite");
        x.writeAttribute("name", clean(d.name()));
        x.writeAttribute("tests", Integer.toString(d.requirements().size()));
        x.writeAttribute("failures", Integer.toString(failures + skipped));
        x.writeAttribute("errors", "0");
        for (RequirementAnswer r : d.requirements()) {
            x.writeCharacters("\n  ");
            x.writeStartElement("testcase");
            x.writeAttribute("classname", clean(d.name()));
            x.writeAttribute("name", clean(r.id()));
            x.writeAttribute("file", c.shown(r.file()).replace('\\', '/'));
            x.writeAttribute(
                    "line", Integer.toString(c.places(r.file()).line(r.span().start())));
            String told = r.state().word() + ": " + Figures.value(r) + ", required " + Figures.required(r)
                    + (Double.isNaN(r.margin()) ? "" : ", margin " + Figures.margin(r.margin(), r.comparison()));
            if (!r.state().isMet()) {
                x.writeStartElement("failure");
                x.writeAttribute("type", r.state().word());
                x.writeAttribute("message", clean(told));
                x.writeCharacters(clean(c.at(r) + " " + r.id() + " is " + told
                        + (r.missing().isEmpty()
                                ? ""
                                : "; not given: "
                                        + String.join(
                                                ", ",
                                                r.missing().stream()
                                                        .map(RequirementAnswer.Missing::path)
                                                        .toList()))
                        + (r.fault() == null ? "" : "; " + r.fault())));
                x.writeEndElement();
            } else {
                x.writeStartElement("system-out");
                x.writeCharacters(clean(told));
                x.writeEndElement();
            }
            x.writeEndElement();
        }
        x.writeCharacters("\n");
        x.writeEndElement();
        x.writeCharacters("\n");
    }

    /** Characters that XML cannot hold become a question mark. */
    private static String clean(String s) {
        StringBuilder b = new StringBuilder(s.length());
        s.codePoints()
                .forEach(p -> b.appendCodePoint(
                        p == 9
                                        || p == 10
                                        || p == 13
                                        || (p >= 32 && p <= 0xD7FF)
                                        || (p >= 0xE000 && p <= 0xFFFD)
                                        || p > 0xFFFF
                                ? p
                                : '?'));
        return b.toString();
    }

    @Override
    public void end(List<String> unreachable) {
        for (String u : unreachable) {
            String text = u.replace("&", "&amp;").replace("<", "&lt;").replace("\"", "&quot;");
            out.println(
                    "<testsuite name=\"backcone\" tests=\"1\" failures=\"0\" errors=\"1\"><testcase classname=\"backcone\""
                            + " name=\"files\"><error message=\"" + clean(text) + "\"/></testcase></testsuite>");
            suites++;
        }
        if (suites == 0) {
            out.println("<testsuite name=\"backcone\" tests=\"0\" failures=\"0\" errors=\"0\"/>");
        }
        out.println("</testsuites>");
    }
}
