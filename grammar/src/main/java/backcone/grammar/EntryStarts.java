package backcone.grammar;

import backcone.grammar.gen.BackconeLexer;
import java.util.List;
import org.jspecify.annotations.Nullable;

/** Looks ahead on the token list: what starts here, and does this line go on with the one above. */
final class EntryStarts {
    private final List<Tok> in;

    EntryStarts(List<Tok> in) {
        this.in = in;
    }

    private Tok at(int index) {
        return in.get(Math.min(index, in.size() - 1));
    }

    private int type(int index) {
        return at(index).getType();
    }

    private boolean isName(int index) {
        return type(index) == BackconeLexer.NAME;
    }

    private boolean isText(int index) {
        int t = type(index);
        return t == BackconeLexer.STRING || t == BackconeLexer.OPENSTRING;
    }

    private boolean isEnd(int index) {
        int t = type(index);
        return t == BackconeLexer.NL || t == BackconeLexer.SEMI || t == BackconeLexer.RBRACE || t == BackconeLexer.EOF;
    }

    static boolean isComparison(int type) {
        return type >= BackconeLexer.EQ && type <= BackconeLexer.GT;
    }

    static boolean isEntryWord(int type) {
        return type >= BackconeLexer.DRIVE && type <= BackconeLexer.GIVES;
    }

    /** The index behind the dotted name that starts at {@code index}. */
    int behindPath(int index) {
        int k = index + 1;
        while (type(k) == BackconeLexer.DOT && isName(k + 1)) {
            k += 2;
        }
        return k;
    }

    /** What a brace holds as far as its first line shows: a bar makes it a table, an arrow a choice. */
    Lines.Holds firstLineHolds(int brace) {
        int k = brace + 1;
        while (type(k) == BackconeLexer.NL) {
            k++;
        }
        for (; ; k++) {
            switch (type(k)) {
                case BackconeLexer.PIPE -> {
                    return Lines.Holds.ROWS;
                }
                case BackconeLexer.ARROW -> {
                    return Lines.Holds.ARMS;
                }
                case BackconeLexer.NL,
                        BackconeLexer.LBRACE,
                        BackconeLexer.RBRACE,
                        BackconeLexer.SEMI,
                        BackconeLexer.EOF -> {
                    return Lines.Holds.BODY;
                }
                default -> {}
            }
        }
    }

    // ---- what starts here

    /** The marker or entry word of the entry that starts at {@code index}; sets how many names its head may hold. */
    int classify(int index, Lines.Item item) {
        item.headNames = 1;
        if (!isName(index)) {
            item.headNames = 0;
            return BackconeLexer.STRAY;
        }
        Tok first = at(index);
        String word = first.getText();
        if (word.equals("each") && (isName(index + 1) || isEnd(index + 1))) {
            return BackconeLexer.EACH_BLOCK;
        }
        if (Words.reserved(word) != null) {
            item.headNames = 0;
            return BackconeLexer.STRAY;
        }
        int k = behindPath(index);
        int next = type(k);
        if (next == BackconeLexer.ASSIGN) {
            return BackconeLexer.FACT;
        }
        if (isComparison(next)) {
            return BackconeLexer.REQUIREMENT;
        }
        if (k > index + 1 || next == BackconeLexer.DOT) {
            return BackconeLexer.FACT;
        }
        Integer entryWord = entryWord(word, index);
        if (entryWord != null) {
            boolean expressionFollows = entryWord == BackconeLexer.REQUIRE
                    || entryWord == BackconeLexer.ASSERT
                    || entryWord == BackconeLexer.APPLIES
                    || entryWord == BackconeLexer.RELATION;
            item.headNames = expressionFollows ? 0 : 1;
            return entryWord;
        }
        if (next == BackconeLexer.COLON) {
            return BackconeLexer.DECLARATION;
        }
        if (isText(k)) {
            return behindText(k);
        }
        if (isName(k)) {
            return twoNames(k, item);
        }
        return next == BackconeLexer.LBRACE ? BackconeLexer.BLOCK : BackconeLexer.FACT;
    }

    /** {@code NAME "…"}: a declaration when a colon follows or was forgotten, else a block with its title. */
    private int behindText(int text) {
        int next = type(text + 1);
        return next == BackconeLexer.COLON || next == BackconeLexer.NAME || next == BackconeLexer.ASSIGN
                ? BackconeLexer.DECLARATION
                : BackconeLexer.BLOCK;
    }

    private int twoNames(int second, Lines.Item item) {
        String word = at(second).getText();
        int next = type(second + 1);
        if (word.equals("on")) {
            return BackconeLexer.BLOCK;
        }
        if (word.equals("for") && (isName(second + 1) || isEnd(second + 1))) {
            return BackconeLexer.FACT_FOR;
        }
        boolean clause = Words.inside(word) != null
                && (isName(second + 1) || isText(second + 1) || type(second + 1) == BackconeLexer.NUMBER)
                && !lineEndsWithBrace(second);
        if (clause && next != BackconeLexer.COLON && !colonBehindText(second + 1)) {
            boolean declares = word.equals("default") || word.equals("range") || word.equals("is");
            return declares ? BackconeLexer.DECLARATION : BackconeLexer.FACT;
        }
        if (next == BackconeLexer.COLON) {
            item.headNames = 2;
            return BackconeLexer.DECLARATION;
        }
        if (isText(second + 1)) {
            item.headNames = 2;
            return behindText(second + 1);
        }
        if (next == BackconeLexer.ASSIGN || next == BackconeLexer.DOT || next == BackconeLexer.LPAREN) {
            return BackconeLexer.FACT;
        }
        if (isComparison(next)) {
            return BackconeLexer.REQUIREMENT;
        }
        item.headNames = 2;
        return BackconeLexer.BLOCK;
    }

    private boolean colonBehindText(int index) {
        return isText(index) && type(index + 1) == BackconeLexer.COLON;
    }

    private boolean lineEndsWithBrace(int index) {
        int k = index;
        while (!isEnd(k)) {
            if (type(k) == BackconeLexer.LBRACE) {
                return true;
            }
            k++;
        }
        return false;
    }

    /** The entry word at {@code index}, when what follows shows that it is one and no name. */
    private @Nullable Integer entryWord(String word, int index) {
        Integer type = Words.entry(word);
        if (type == null) {
            return null;
        }
        int next = index + 1;
        if (isEnd(next)) {
            return type;
        }
        if (isName(next) && !takesColon(type) && (type(next + 1) == BackconeLexer.COLON || colonBehindText(next + 1))) {
            // method m "…" : Kind declares a name, whatever it spells
            return null;
        }

        boolean fits = switch (type) {
            case BackconeLexer.USE -> isName(next) || (isText(next) && type(next + 1) != BackconeLexer.COLON);
            case BackconeLexer.EDITIONS -> type(next) == BackconeLexer.NUMBER;
            case BackconeLexer.RELATION -> isText(next) || type(next) == BackconeLexer.COLON || at(next).is("when");
            case BackconeLexer.EXAMPLE -> isText(next) && type(next + 1) != BackconeLexer.COLON;
            case BackconeLexer.REQUIRE, BackconeLexer.ASSERT ->
                isName(next)
                        || type(next) == BackconeLexer.NUMBER
                        || type(next) == BackconeLexer.LPAREN
                        || type(next) == BackconeLexer.MINUS;
            default -> isName(next);
        };
        return fits ? type : null;
    }

    private static boolean takesColon(int type) {
        return switch (type) {
            case BackconeLexer.PART,
                    BackconeLexer.PARTS,
                    BackconeLexer.LIMIT,
                    BackconeLexer.CHECK,
                    BackconeLexer.TABLE,
                    BackconeLexer.RELATION -> true;
            default -> false;
        };
    }

    // ---- does the line go on

    /** Does the line at {@code index} go on with the entry above, outside of brackets? */
    boolean goesOn(int index, Lines.Item item, boolean inArms) {
        return switch (type(index)) {
            case BackconeLexer.STAR,
                    BackconeLexer.SLASH,
                    BackconeLexer.PLUS,
                    BackconeLexer.MINUS,
                    BackconeLexer.CARET,
                    BackconeLexer.EQ,
                    BackconeLexer.NE,
                    BackconeLexer.LE,
                    BackconeLexer.GE,
                    BackconeLexer.LT,
                    BackconeLexer.GT,
                    BackconeLexer.DOTDOT,
                    BackconeLexer.COLON,
                    BackconeLexer.COMMA,
                    BackconeLexer.ARROW -> true;
            case BackconeLexer.ASSIGN -> !item.pastSign;
            case BackconeLexer.LBRACE -> takesBody(item);
            case BackconeLexer.NAME -> clauseGoesOn(index, item, inArms);
            default -> false;
        };
    }

    private static boolean takesBody(Lines.Item item) {
        return switch (item.type) {
            case BackconeLexer.BLOCK,
                    BackconeLexer.DRIVE,
                    BackconeLexer.RATE,
                    BackconeLexer.VARIANT,
                    BackconeLexer.FAMILY,
                    BackconeLexer.CHOICE,
                    BackconeLexer.KIND,
                    BackconeLexer.CHAPTER,
                    BackconeLexer.METHOD,
                    BackconeLexer.TABLE,
                    BackconeLexer.CASES,
                    BackconeLexer.EACH_BLOCK,
                    BackconeLexer.EXAMPLE -> true;
            default -> item.choosing;
        };
    }

    private boolean clauseGoesOn(int index, Lines.Item item, boolean inArms) {
        String word = at(index).getText();
        switch (word) {
            case "and", "or" -> {
                return !isEnd(index + 1) && type(index + 1) != BackconeLexer.ASSIGN;
            }
            case "else" -> {
                return isText(index + 1) || (!inArms && !isEnd(index + 1));
            }
            default -> {}
        }
        if (Words.inside(word) == null || isEntryLike(index)) {
            return false;
        }
        int next = index + 1;
        boolean standsAlone = word.equals("measured")
                || word.equals("assumed")
                || (word.equals("rows") && item.type == BackconeLexer.TABLE);
        if (isEnd(next) && !standsAlone) {
            // a clause word alone is half-typed: the entry above is not to suffer
            return false;
        }
        // an equation still to come, or a head that lacks it
        boolean declares = item.type == BackconeLexer.DECLARATION
                || (!item.pastSign && (item.type == BackconeLexer.FACT || item.type == BackconeLexer.BLOCK));
        return switch (word) {
            case "per" -> isName(next) || isText(next);
            case "taking", "because", "until", "within" -> true;
            case "reading" -> isName(next);
            case "rows" -> isName(next) || standsAlone;
            case "measured", "assumed" -> isEnd(next) || isText(next) || isName(next);
            case "by" -> isText(next) || item.type == BackconeLexer.RATE || item.type == BackconeLexer.TABLE;
            case "range", "default", "worst", "needed", "offer" -> declares;
            case "relation" -> declares && !isText(next) && !at(next).is("when");
            case "is" -> (declares && isName(next)) || item.type == BackconeLexer.KIND;
            case "as", "under" -> item.type == BackconeLexer.RATE && isName(next);
            case "between" -> item.type == BackconeLexer.REQUIRE || item.rooting;
            case "from", "at" -> item.settling;
            case "on" -> type(next) == BackconeLexer.DATE;
            case "where" -> item.type == BackconeLexer.COLLECT;
            default -> false;
        };
    }

    /** An entry word with what belongs to it. */
    boolean startsWithEntryWord(int index) {
        return isName(index) && !isEnd(index + 1) && entryWord(at(index).getText(), index) != null;
    }

    /** A fact, a requirement, a declaration or a block, whatever its first word spells. */
    boolean isEntryLike(int index) {
        int k = behindPath(index);
        if (type(k) == BackconeLexer.ASSIGN || isComparison(type(k))) {
            return true;
        }
        if (k > index + 1) {
            return false;
        }
        if (type(k) == BackconeLexer.LBRACE) {
            return true;
        }
        if (isName(k)) {
            k++;
        }
        if (isText(k)) {
            k++;
        }
        return type(k) == BackconeLexer.COLON;
    }

    /** Does the line at {@code index} go on with an expression whose bracket is still open? */
    boolean goesOnInBracket(int index, boolean inArms, boolean lineIsIncomplete) {
        switch (type(index)) {
            case BackconeLexer.RBRACE, BackconeLexer.LBRACE, BackconeLexer.SEMI, BackconeLexer.EOF -> {
                return false;
            }
            case BackconeLexer.NAME -> {
                if (!nameGoesOnInBracket(index, lineIsIncomplete)) {
                    return false;
                }
            }
            default -> {}
        }
        return !inArms || !lineHasArrow(index);
    }

    private boolean nameGoesOnInBracket(int index, boolean lineIsIncomplete) {
        String word = at(index).getText();
        if (word.equals("each")) {
            return !(isName(index + 1) && type(index + 2) == BackconeLexer.LBRACE);
        }
        if (word.equals("else")) {
            return false;
        }
        if (Words.reserved(word) != null) {
            return true;
        }
        int k = behindPath(index);
        int next = type(k);
        if (next == BackconeLexer.ASSIGN) {
            return false;
        }
        if (isComparison(next)) {
            return lineIsIncomplete;
        }
        if (k > index + 1) {
            return true;
        }
        if (next == BackconeLexer.COLON || next == BackconeLexer.LBRACE || isText(k)) {
            return false;
        }
        if (isName(k)) {
            String second = at(k).getText();
            boolean operator = word.equals("given") || word.equals("root") || word.equals("settle");
            boolean infix = Words.reserved(second) != null || Words.inside(second) != null;
            return operator || infix;
        }
        return !(next == BackconeLexer.NUMBER || next == BackconeLexer.DATE)
                || word.equals("from")
                || word.equals("within")
                || word.equals("between")
                || word.equals("at");
    }

    private boolean lineHasArrow(int index) {
        for (int k = index; ; k++) {
            switch (type(k)) {
                case BackconeLexer.ARROW -> {
                    return true;
                }
                case BackconeLexer.NL, BackconeLexer.EOF, BackconeLexer.LBRACE, BackconeLexer.RBRACE -> {
                    return false;
                }
                default -> {}
            }
        }
    }
}
