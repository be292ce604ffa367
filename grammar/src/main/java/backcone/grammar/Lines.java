package backcone.grammar;

import backcone.grammar.gen.BackconeLexer;
import java.util.ArrayDeque;
import java.util.ArrayList;
import java.util.Deque;
import java.util.List;
import org.jspecify.annotations.Nullable;

/**
 * Last pass over the token list: which line ends count, what each entry is, which words are keywords, what each brace
 * holds. Afterwards every entry starts with a marker or an entry word, brackets end inside their entry, and the parser
 * never has to look beyond one.
 */
final class Lines {
    /** What an open bracket holds. */
    enum Holds {
        BODY,
        ROWS,
        ARMS,
        WORDS,
        BRACKET
    }

    /** The entry, row, arm or word that is being read. */
    static final class Item {
        /** The type of the marker or entry word it starts with; 0 while it has not started. */
        int type;

        @Nullable
        Tok start;

        /** Names of its head that are still to come and are names whatever they spell. */
        int headNames;

        /** Behind the sign of a fact or requirement. */
        boolean pastSign;

        boolean choosing;
        boolean settling;
        boolean rooting;
        boolean afterBody;
    }

    private record Frame(Holds holds, Item item) {}

    private final List<Tok> in;
    private final List<Finding> findings;
    private final List<Tok> out;
    private final Deque<Frame> frames = new ArrayDeque<>();
    private final EntryStarts starts;
    private Item item = new Item();
    private int i;

    private Lines(List<Tok> in, List<Finding> findings) {
        this.in = in;
        this.findings = findings;
        this.out = new ArrayList<>(in.size() + in.size() / 4 + 8);
        this.starts = new EntryStarts(in);
        frames.push(new Frame(Holds.BODY, item));
    }

    /** Expects balanced braces and the end-of-file token at the end. */
    static List<Tok> read(List<Tok> tokens, List<Finding> findings) {
        Lines pass = new Lines(tokens, findings);
        pass.run();
        return pass.out;
    }

    private void run() {
        while (true) {
            Tok t = in.get(i);
            switch (t.getType()) {
                case BackconeLexer.EOF -> {
                    closeBrackets(t);
                    out.add(t);
                    return;
                }
                case BackconeLexer.NL -> lineEnd(t);
                case BackconeLexer.SEMI -> {
                    closeBrackets(t);
                    endItem(t);
                    i++;
                }
                case BackconeLexer.LBRACE -> {
                    openBrace(t);
                    i++;
                }
                case BackconeLexer.RBRACE -> {
                    closeBrackets(t);
                    closeBrace(t);
                    i++;
                }
                default -> word(t);
            }
        }
    }

    private Holds holds() {
        return frames.getFirst().holds();
    }

    // ---- line ends

    private void lineEnd(Tok nl) {
        int next = i + 1;
        boolean blank = false;
        while (in.get(next).getType() == BackconeLexer.NL) {
            blank = true;
            next++;
        }
        i = next;
        if (item.type == 0) {
            return;
        }
        if (holds() == Holds.BRACKET) {
            if (!blank && starts.goesOnInBracket(next, holdsBehindBrackets() == Holds.ARMS, lastIsLogical())) {
                return;
            }
            closeBrackets(nl);
        }
        if (holds() != Holds.ROWS && !item.afterBody && starts.goesOn(next, item, holds() == Holds.ARMS)) {
            return;
        }
        endItem(nl);
    }

    /** True behind {@code and}, {@code or}, {@code not}, a comma or an opening bracket: the line is not complete. */
    private boolean lastIsLogical() {
        return switch (out.get(out.size() - 1).getType()) {
            case BackconeLexer.AND, BackconeLexer.OR, BackconeLexer.NOT, BackconeLexer.COMMA, BackconeLexer.LPAREN ->
                true;
            default -> false;
        };
    }

    private Holds holdsBehindBrackets() {
        for (Frame f : frames) {
            if (f.holds() != Holds.BRACKET) {
                return f.holds();
            }
        }
        return Holds.BODY;
    }

    private void endItem(Tok end) {
        if (item.type != 0) {
            out.add(end);
            item = new Item();
        }
    }

    private void closeBrackets(Tok before) {
        while (holds() == Holds.BRACKET) {
            Tok close = Tok.inserted(
                    before, BackconeLexer.RPAREN, out.get(out.size() - 1).end());
            out.add(close);
            frames.pop();
            if (before.getType() != BackconeLexer.RBRACE || !before.isInserted()) {
                missing(close);
            }
        }
    }

    /** Brackets closed by us are a finding of the parser's kind: said once by the entry. */
    private void missing(Tok close) {
        if (item.start == null || !item.start.faulty) {
            findings.add(new Finding(Finding.Kind.UNCLOSED_BRACKET, close.start(), close.start(), "(", ""));
        }
        fault();
    }

    private void fault() {
        if (item.start != null) {
            item.start.faulty = true;
        }
    }

    // ---- braces

    private void openBrace(Tok t) {
        Holds holds;
        if (item.type == 0) {
            start(t);
        }
        if (t.faulty) {
            fault();
        }
        if (item.choosing) {
            holds = Holds.ARMS;
            item.choosing = false;
        } else if (item.type == BackconeLexer.TABLE || item.type == BackconeLexer.FAMILY) {
            holds = Holds.ROWS;
        } else if (item.type == BackconeLexer.CHOICE || item.type == BackconeLexer.CASES) {
            holds = Holds.WORDS;
        } else {
            holds = starts.firstLineHolds(i);
        }
        switch (holds) {
            case ARMS -> t.setType(BackconeLexer.ARMS_OPEN);
            case ROWS -> t.setType(BackconeLexer.ROWS_OPEN);
            case WORDS -> t.setType(BackconeLexer.WORDS_OPEN);
            default -> {}
        }
        out.add(t);
        frames.push(new Frame(holds, item));
        item = new Item();
    }

    private void closeBrace(Tok t) {
        Frame frame = frames.pop();
        if (t.isInserted()) {
            // the entry before a forgotten brace is half-typed as a rule: said once, of the brace
            fault();
        }
        out.add(t);
        item = frame.item();
        if (frame.holds() == Holds.ARMS) {
            return;
        }
        item.afterBody = true;
        int next = in.get(i + 1).getType();
        boolean ends = next == BackconeLexer.NL
                || next == BackconeLexer.SEMI
                || next == BackconeLexer.RBRACE
                || next == BackconeLexer.EOF;
        if (!ends && holds() != Holds.BRACKET) {
            endItem(Tok.inserted(t, BackconeLexer.SEMI, t.end()));
        }
    }

    // ---- words

    private void word(Tok t) {
        if (item.type == 0) {
            start(t);
            if (item.type == t.getType() && item.start == t) {
                // an entry word
                take(t);
                return;
            }
        }
        switch (t.getType()) {
            case BackconeLexer.LPAREN -> frames.push(new Frame(Holds.BRACKET, item));
            case BackconeLexer.RPAREN -> {
                if (holds() == Holds.BRACKET) {
                    frames.pop();
                }
            }
            case BackconeLexer.ASSIGN,
                    BackconeLexer.EQ,
                    BackconeLexer.NE,
                    BackconeLexer.LE,
                    BackconeLexer.GE,
                    BackconeLexer.LT,
                    BackconeLexer.GT -> {
                if (splitsRequirement(t)) {
                    return;
                }
                item.pastSign = true;
            }
            case BackconeLexer.COMMA -> {
                if (holds() == Holds.WORDS) {
                    t.setType(BackconeLexer.WORD_COMMA);
                    out.add(t);
                    i++;
                    item = new Item();
                    return;
                }
            }
            case BackconeLexer.NAME -> {
                if (splitsEntry(t)) {
                    return;
                }
                name(t);
                if (t.getType() == BackconeLexer.NAME && isReference()) {
                    out.add(Tok.inserted(t, BackconeLexer.REFERENCE, t.start()));
                }
            }
            default -> {}
        }
        take(t);
    }

    private void take(Tok t) {
        if (t.faulty) {
            fault();
        }
        out.add(t);
        i++;
    }

    private void start(Tok t) {
        int marker;
        switch (holds()) {
            case ROWS -> marker = BackconeLexer.ROW;
            case ARMS -> marker = BackconeLexer.ARM;
            case WORDS -> {
                marker = BackconeLexer.WORD;
                item.headNames = 1;
            }
            default -> marker = starts.classify(i, item);
        }
        item.type = marker;
        if (EntryStarts.isEntryWord(marker)) {
            t.setType(marker);
            item.start = t;
        } else {
            Tok mark = Tok.inserted(t, marker, t.start());
            item.start = mark;
            out.add(mark);
        }
    }

    /** {@code teeth = 16 hand = left}: two entries on one line. Reads on as if a semicolon stood between. */
    private boolean splitsEntry(Tok t) {
        boolean requirement = item.type == BackconeLexer.REQUIREMENT;
        boolean splits = item.pastSign && (requirement || item.type == BackconeLexer.FACT);
        if (!splits || holds() == Holds.BRACKET || !behindOperand()) {
            return false;
        }
        int k = starts.behindPath(i);
        boolean next = in.get(k).getType() == BackconeLexer.ASSIGN
                || (requirement && EntryStarts.isComparison(in.get(k).getType()));
        if (!next
                || in.get(k).getLine() != t.getLine()
                || out.get(out.size() - 1).getLine() != t.getLine()) {
            return false;
        }
        String name = t.getText();
        findings.add(new Finding(Finding.Kind.TWO_ENTRIES, t.start(), t.end(), name, ""));
        fault();
        endItem(Tok.inserted(t, BackconeLexer.SEMI, out.get(out.size() - 1).end()));
        return true;
    }

    /**
     * {@code pitting >= 1.1 bending >= 1.4}: what was glued as a unit is the name of a second requirement, since a
     * requirement holds one comparison.
     */
    private boolean splitsRequirement(Tok comparison) {
        Tok last = out.get(out.size() - 1);
        boolean splits = item.type == BackconeLexer.REQUIREMENT
                && item.pastSign
                && holds() == Holds.BODY
                && comparison.getType() != BackconeLexer.ASSIGN
                && last.getType() == BackconeLexer.UNIT
                && last == in.get(i - 1)
                && isWord(last.getText());
        if (!splits) {
            return false;
        }
        out.remove(out.size() - 1);
        last.setType(BackconeLexer.NAME);
        findings.add(new Finding(Finding.Kind.TWO_ENTRIES, last.start(), last.end(), last.getText(), ""));
        fault();
        endItem(Tok.inserted(last, BackconeLexer.SEMI, out.get(out.size() - 1).end()));
        i--;
        return true;
    }

    private static boolean isWord(String unit) {
        return Character.isLetter(unit.charAt(0))
                && unit.chars().allMatch(c -> Character.isLetterOrDigit(c) || c == '_');
    }

    /** Decides whether a word inside an entry is a keyword. */
    private void name(Tok t) {
        Tok last = out.get(out.size() - 1);
        String text = t.getText();
        Integer reserved = Words.reserved(text);
        if (reserved != null) {
            if (last.getType() == BackconeLexer.DOT && reserved != BackconeLexer.ELSE) {
                return;
            }
            t.setType(reserved);
            if (reserved == BackconeLexer.CHOOSE) {
                item.choosing = true;
            }
            return;
        }
        if ((item.headNames > 0 && !last.isInserted() && last.getType() == BackconeLexer.NAME)
                || (item.headNames > 0 && isStart(last))) {
            item.headNames--;
            return;
        }
        item.headNames = 0;
        if (last.getType() == BackconeLexer.DOT) {
            return;
        }
        if (last.getType() == BackconeLexer.AT && t.is("most")) {
            t.setType(BackconeLexer.MOST);
        } else if (last.getType() == BackconeLexer.ROOT && t.is("of")) {
            t.setType(BackconeLexer.OF);
        } else if ((last.getType() == BackconeLexer.APPLIES || last.getType() == BackconeLexer.RELATION)
                && t.is("when")) {
            t.setType(BackconeLexer.WHEN);
        } else if (endsOperand(last)) {
            Integer inside = holds() == Holds.ROWS ? null : Words.inside(text);
            if (inside != null) {
                t.setType(inside);
            }
        } else {
            prefix(t);
        }
    }

    /** {@code = gear sun}: two names side by side where a value starts. */
    private boolean isReference() {
        Tok next = in.get(i + 1);
        if (next.getType() != BackconeLexer.NAME) {
            return false;
        }
        int last = out.get(out.size() - 1).getType();
        boolean valueStarts = (last == BackconeLexer.ASSIGN && item.type != BackconeLexer.COLLECT)
                || (holds() == Holds.ROWS && (last == BackconeLexer.PIPE || last == BackconeLexer.ROW));
        if (!valueStarts) {
            return false;
        }
        String word = next.getText();
        return Words.reserved(word) == null && (Words.inside(word) == null || holds() == Holds.ROWS);
    }

    private boolean isStart(Tok last) {
        return last == item.start;
    }

    /** {@code given x}, {@code root of x}, {@code settle x}: two words side by side where an operand starts. */
    private void prefix(Tok t) {
        Tok next = in.get(i + 1);
        if (next.getType() != BackconeLexer.NAME && next.getType() != BackconeLexer.NUMBER) {
            return;
        }
        if (t.is("given")) {
            t.setType(BackconeLexer.GIVEN);
        } else if (t.is("root") && next.is("of")) {
            t.setType(BackconeLexer.ROOT);
            item.rooting = true;
        } else if (t.is("settle")) {
            t.setType(BackconeLexer.SETTLE);
            item.settling = true;
        }
    }

    private boolean behindOperand() {
        return endsOperand(out.get(out.size() - 1));
    }

    private static boolean endsOperand(Tok t) {
        return switch (t.getType()) {
            case BackconeLexer.NAME,
                    BackconeLexer.NUMBER,
                    BackconeLexer.UNIT,
                    BackconeLexer.STRING,
                    BackconeLexer.OPENSTRING,
                    BackconeLexer.DATE,
                    BackconeLexer.RPAREN,
                    BackconeLexer.RBRACE,
                    BackconeLexer.MEASURED,
                    BackconeLexer.ASSUMED,
                    BackconeLexer.NEEDED,
                    BackconeLexer.WHOLE -> true;
            default -> false;
        };
    }
}
