package backcone.engine.parse;

import backcone.engine.diagnostics.Code;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.diagnostics.Severity;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import backcone.grammar.Tok;
import backcone.grammar.Tokens;
import java.util.ArrayList;
import java.util.List;
import org.jspecify.annotations.Nullable;

/**
 * The canonical layout: two blanks for each level, four more for a continued line, one entry a line, {@code =},
 * {@code =>}, {@code |} and trailing notes lined up. Numbers and texts stay as written, nothing is reordered, and
 * formatting twice changes nothing.
 */
public final class Formatter {
    private static final String BYTE_ORDER_MARK = "\uFEFF";

    /** The formatted text, or null with the reasons why there is none. */
    public record Result(@Nullable String text, List<Diagnostic> problems) {}

    private Formatter() {}

    public static Result format(FileId file, String text) {
        List<Diagnostic> problems = new ArrayList<>();
        for (Diagnostic d : Parser.parse(file, text).problems()) {
            if (d.severity() == Severity.ERROR) {
                problems.add(d);
            }
        }
        if (!problems.isEmpty()) {
            return new Result(null, List.copyOf(problems));
        }
        Tokens tokens = Tokens.of(text);
        String formatted = write(Layout.of(text, tokens), text);
        if (!sameTokens(tokens, Tokens.of(formatted))) {
            // never hand out a text that means something else
            return new Result(
                    null,
                    List.of(Diagnostic.of(
                            Code.INTERNAL,
                            file,
                            new Span(0, 0),
                            "this text can't be laid out without a change of its meaning, so it is left as it is:"
                                    + " please report it")));
        }
        return new Result(formatted, List.of());
    }

    private static String write(List<Line> lines, String old) {
        int firstEnd = old.indexOf('\n');
        String end = firstEnd > 0 && old.charAt(firstEnd - 1) == '\r' ? "\r\n" : "\n";
        StringBuilder b = new StringBuilder(old.length() + old.length() / 8);
        if (old.startsWith(BYTE_ORDER_MARK)) {
            b.append(BYTE_ORDER_MARK);
        }
        boolean first = true;
        for (Line line : lines) {
            if (line.blankBefore && !first) {
                b.append(end);
            }
            b.append(line.text()).append(end);
            first = false;
        }
        return b.toString();
    }

    /** Compares all but line ends and what else only separates; markers show that entries start at the same places. */
    private static boolean sameTokens(Tokens a, Tokens b) {
        return tokens(a.list()).equals(tokens(b.list())) && tokens(a.comments()).equals(tokens(b.comments()));
    }

    private static List<String> tokens(List<Tok> list) {
        List<String> out = new ArrayList<>(list.size());
        for (Tok t : list) {
            if (!Layout.isSeparator(t.getType())) {
                out.add(t.getType() + " " + (t.isInserted() ? "" : t.getText().stripTrailing()));
            }
        }
        return out;
    }
}
