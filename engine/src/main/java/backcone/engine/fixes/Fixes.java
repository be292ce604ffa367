package backcone.engine.fixes;

import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.text.Span;
import java.util.ArrayList;
import java.util.List;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import org.jspecify.annotations.Nullable;

/**
 * What can be done at a place of a drive text. Fixes that promise a result were found by running the tape with other numbers,
 * and each was tried over the whole edited text before it is offered.
 */
public final class Fixes {
    private static final Pattern MEANT = Pattern.compile("Did you mean `([^`]+)`\\?");
    private static final Pattern QUOTED = Pattern.compile("`([^`]+)`");

    private Fixes() {}

    public static List<Fix> at(Subject subject, Span range) {
        if (subject.file().isMethodFile()) {
            return said(subject, range);
        }
        Trial trial = new Trial(subject);
        Bars bars = new Bars(subject, trial);
        List<Fix> out = new ArrayList<>(said(subject, range));
        out.addAll(new Search(subject, trial).at(range));
        out.addAll(new MissingInputs(subject, trial).at(range));
        out.addAll(new Shared(subject).at(range));
        out.addAll(bars.requirements(range));
        out.addAll(new Conversions(subject).at(range));
        out.addAll(new Lets(subject).at(range));
        out.addAll(bars.deviations(range));
        Tidy tidy = new Tidy(subject);
        out.replaceAll(tidy::of);
        return out;
    }

    /** Whether two places share a character or touch: a cursor is an empty range. */
    static boolean touches(Span a, Span b) {
        return a.start() <= b.end() && b.start() <= a.end();
    }

    /** A finding that names what was probably meant without saying what to replace: the word it found. */
    private static @Nullable Fix meant(Subject s, Diagnostic d) {
        Matcher m = MEANT.matcher(d.message());
        if (!m.find() || d.span().end() > s.text().length()) {
            return null;
        }
        String meant = m.group(1);
        String there = s.text().substring(d.span().start(), d.span().end());
        Matcher word = QUOTED.matcher(d.message().substring(0, m.start()));
        while (word.find()) {
            int at = there.indexOf(word.group(1));
            if (at >= 0
                    && there.indexOf(word.group(1), at + 1) < 0
                    && !word.group(1).equals(meant)) {
                int from = d.span().start() + at;
                Span span = new Span(from, from + word.group(1).length());
                return new Fix(
                        "write " + meant,
                        Fix.Kind.QUICK_FIX,
                        true,
                        List.of(Edits.inPlace(d.file(), s.text(), span, meant)),
                        List.of(d.code().id()));
            }
        }
        return null;
    }

    /** What findings propose themselves: the nearest name, the unit that was meant, a missing sign. */
    private static List<Fix> said(Subject s, Span range) {
        List<Fix> out = new ArrayList<>();
        for (Diagnostic d : s.diagnostics()) {
            if (!touches(d.span(), range)) {
                continue;
            }
            for (Diagnostic.Fix f : d.fixes()) {
                out.add(new Fix(
                        f.title(),
                        Fix.Kind.QUICK_FIX,
                        d.fixes().size() == 1,
                        List.of(new TextEdit(d.file(), f.span(), f.newText())),
                        List.of(d.code().id())));
            }
            if (d.fixes().isEmpty()) {
                Fix near = meant(s, d);
                if (near != null) {
                    out.add(near);
                }
            }
        }
        return out;
    }
}
