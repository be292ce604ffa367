package backcone.lsp;

import backcone.engine.Analysis;
import backcone.engine.States;
import backcone.engine.diagnostics.Code;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.text.Span;
import java.util.ArrayList;
import java.util.List;
import org.jspecify.annotations.Nullable;

/** What stays shown of an earlier version while a line can't be read. */
final class Stale {
    private Stale() {}

    /** Whether some line can't be read. */
    static boolean isBroken(Analysis a) {
        for (Diagnostic d : a.diagnostics()) {
            if (isSyntax(d.code())) {
                return true;
            }
        }
        return false;
    }

    static boolean isSyntax(Code c) {
        return c.id().startsWith("BC1");
    }

    /** Findings that tell what came out, as opposed to what the text says. */
    static boolean isResult(Code c) {
        return States.says(c)
                || switch (c) {
                    case MISSING_INPUT,
                            TIGHT,
                            ACCEPTED,
                            ACCEPTANCE_SOON,
                            ACCEPTANCE_NOT_NEEDED,
                            LIMIT_PASSED,
                            CUSTOM_HINT,
                            NOT_APPLICABLE,
                            FAULT,
                            NO_ROOT,
                            BEYOND_TABLE,
                            IMPOSSIBLE,
                            UNUSED_NAME,
                            DISAGREE,
                            NOT_WHOLE -> true;
                    default -> false;
                };
    }

    /** Findings that come and go while a word is typed. */
    static boolean flickers(Code c) {
        return isSyntax(c) || c.id().startsWith("BC2") || c.id().startsWith("BC3");
    }

    /** The results of an earlier version at their places in a later one, but for those in what was changed. */
    static List<Diagnostic> moved(Analysis before, Analysis now) {
        String a = before.text();
        String b = now.text();
        int most = Math.min(a.length(), b.length());
        int head = 0;
        while (head < most && a.charAt(head) == b.charAt(head)) {
            head++;
        }
        int tail = 0;
        while (tail < most - head && a.charAt(a.length() - 1 - tail) == b.charAt(b.length() - 1 - tail)) {
            tail++;
        }
        List<Diagnostic> out = new ArrayList<>();
        for (Diagnostic d : before.diagnostics()) {
            if (!isResult(d.code())) {
                continue;
            }
            Span s = moved(d.span(), head, a.length() - tail, b.length() - a.length());
            if (s != null) {
                out.add(new Diagnostic(
                        d.code(),
                        d.severity(),
                        d.file(),
                        s,
                        d.message() + " (As before this edit: a line can't be read yet.)",
                        d.related(),
                        d.fixes()));
            }
        }
        return out;
    }

    static @Nullable Span moved(Span s, int from, int to, int by) {
        if (s.end() < from) {
            return s;
        } else if (s.start() > to) {
            return new Span(s.start() + by, s.end() + by);
        } else if (s.start() <= from && s.end() >= to && s.end() + by >= s.start()) {
            return new Span(s.start(), s.end() + by); // the change lies within
        }
        return null;
    }
}
