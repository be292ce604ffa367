package backcone.grammar;

import backcone.grammar.gen.BackconeLexer;
import java.util.ArrayList;
import java.util.List;

/** Third pass: after it every brace has its partner. */
final class Braces {
    private Braces() {}

    static List<Tok> balance(List<Tok> in, List<Finding> findings, boolean quiet) {
        List<Tok> out = new ArrayList<>(in.size() + 4);
        List<Tok> open = new ArrayList<>();
        for (Tok t : in) {
            switch (t.getType()) {
                case BackconeLexer.LBRACE:
                    open.add(t);
                    out.add(t);
                    break;
                case BackconeLexer.RBRACE:
                    if (open.isEmpty()) {
                        findings.add(new Finding(Finding.Kind.STRAY_BRACE, t.start(), t.end(), "}", ""));
                    } else {
                        open.remove(open.size() - 1);
                        out.add(t);
                    }
                    break;
                case BackconeLexer.EOF:
                    if (!open.isEmpty() && !quiet) {
                        Tok last = open.get(open.size() - 1);
                        findings.add(new Finding(
                                Finding.Kind.UNCLOSED_BRACE, last.start(), last.end(), "{", String.valueOf(open.size())));
                    }
                    for (int k = open.size(); k > 0; k--) {
                        out.add(Tok.inserted(t, BackconeLexer.RBRACE, t.start()));
                    }
                    out.add(t);
                    break;
                default:
                    out.add(t);
            }
        }
        return out;
    }
}
