package backcone.grammar;

import backcone.grammar.gen.BackconeLexer;
import java.util.ArrayList;
import java.util.List;
import org.antlr.v4.runtime.Token;

/**
 * The token list of a text, ready for the parser, with the comments apart.
 *
 * @param list ends with the end-of-file token; braces are balanced and every entry starts with its marker or word
 */
public record Tokens(List<Tok> list, List<Tok> comments, List<Finding> findings) {
    private static final char BYTE_ORDER_MARK = '\uFEFF';

    public static Tokens of(String text) {
        int start = !text.isEmpty() && text.charAt(0) == BYTE_ORDER_MARK ? 1 : 0;
        Scanner scanner = new Scanner(text, start);
        List<Finding> findings = new ArrayList<>();
        List<Tok> comments = new ArrayList<>();
        List<Tok> list = new ArrayList<>(text.length() / 4 + 8);
        while (true) {
            Tok t = scanner.next();
            if (t.getType() == BackconeLexer.COMMENT) {
                comments.add(t);
                continue;
            }
            if (t.getType() == BackconeLexer.BAD) {
                badCharacter(t, list, findings);
                continue;
            }
            if (t.getType() == BackconeLexer.OPENSTRING) {
                t.faulty = true;
                findings.add(new Finding(Finding.Kind.OPEN_STRING, t.start(), t.end(), t.getText(), ""));
            }
            list.add(t);
            if (t.getType() == Token.EOF) {
                break;
            }
        }
        List<Tok> glued = Numbers.glue(list, findings);
        List<Tok> shallow = Nesting.cut(glued, findings);
        List<Tok> balanced = Braces.balance(shallow, findings, shallow != glued);
        List<Tok> read = Lines.read(balanced, findings);
        return new Tokens(read, comments, findings);
    }

    /** Neighbouring unknown characters are one token and one finding. */
    private static void badCharacter(Tok t, List<Tok> list, List<Finding> findings) {
        t.faulty = true;
        if (!list.isEmpty()) {
            Tok last = list.get(list.size() - 1);
            if (last.getType() == BackconeLexer.BAD && last.touches(t)) {
                last.setStopIndex(t.end() - 1);
                Finding first = findings.remove(findings.size() - 1);
                findings.add(new Finding(first.kind(), first.start(), last.end(), last.getText(), ""));
                return;
            }
        }
        list.add(t);
        findings.add(new Finding(Finding.Kind.BAD_CHARACTER, t.start(), t.end(), t.getText(), ""));
    }
}
