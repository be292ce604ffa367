package backcone.engine.parse;

import backcone.engine.diagnostics.Code;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import backcone.grammar.Tok;
import backcone.grammar.gen.BackconeLexer;
import backcone.grammar.gen.BackconeParser;
import java.util.List;
import org.antlr.v4.runtime.ParserRuleContext;
import org.antlr.v4.runtime.Token;
import org.jspecify.annotations.Nullable;

/** Words for an entry, row or arm that does not read: what was found, what is expected, what to do next. */
final class Misreadings {
    private final FileId file;
    private final List<Tok> tokens;

    Misreadings(FileId file, List<Tok> tokens) {
        this.file = file;
        this.tokens = tokens;
    }

    /** {@code found} is the first token that could not be used; {@code failure} is null when only text was left over. */
    Diagnostic say(ParserRuleContext item, Recovery.@Nullable Failure failure, Token found) {
        if (item instanceof BackconeParser.ArmContext) {
            return arm(failure, found);
        }
        if (item instanceof BackconeParser.RowContext) {
            return row(failure, found);
        }
        if (item instanceof BackconeParser.WordContext) {
            return at(
                    Code.SYNTAX,
                    found,
                    "each word of a list is a name and perhaps a meaning, `word \"meaning\"`; found "
                            + Forms.found(found));
        }
        int kind = kind(item.getStart());
        if (kind == BackconeLexer.STRAY) {
            return stray(found);
        }
        if (failure == null) {
            return leftOver(item, found);
        }
        if (failure.rule().getRuleIndex() == BackconeParser.RULE_path) {
            return path(found);
        }
        if (isOperandMissing(failure)) {
            return missingValue(item, found);
        }
        switch (kind) {
            case BackconeLexer.FACT -> {
                if (failure.expected().contains(BackconeLexer.ASSIGN)) {
                    return missingAssign(item, found);
                }
            }
            case BackconeLexer.DECLARATION -> {
                Diagnostic declaration = declaration(item, failure, found);
                if (declaration != null) {
                    return declaration;
                }
            }
            case BackconeLexer.BLOCK -> {
                if (before(found).getType() == BackconeLexer.ON) {
                    return missingAt(
                            Code.SYNTAX,
                            found,
                            "after `on` the shaft is missing: write its name, for example `pinion on motor { … }`");
                }
            }
            default -> {}
        }
        return incomplete(item, failure, found);
    }

    // ---- rows and arms

    private Diagnostic arm(Recovery.@Nullable Failure failure, Token found) {
        Token before = before(found);
        if (failure == null) {
            return leftOverIn("an arm reads `condition => value`", found);
        }
        if (isOperandMissing(failure)) {
            return kind(before) == BackconeLexer.ARM
                    ? at(
                            Code.SYNTAX,
                            found,
                            "an arm reads `condition => value`; found " + Forms.found(found)
                                    + " where its condition should start")
                    : missingOperand(before, found, "");
        }
        if (failure.expected().contains(BackconeLexer.ARROW)) {
            return missingAt(
                    Code.SYNTAX,
                    found,
                    "`=>` and a value are missing after " + Forms.quoted(before)
                            + ": an arm reads `condition => value`, the last one `else => value`");
        }
        return clauseOrGeneral(failure, found, "an arm reads `condition => value`");
    }

    private Diagnostic row(Recovery.@Nullable Failure failure, Token found) {
        String form = "a row holds its cells between bars, `a | b | c`";
        if (failure == null) {
            return leftOverIn(form, found);
        }
        if (isOperandMissing(failure)) {
            Token before = before(found);
            boolean empty = (kind(before) == BackconeLexer.ROW || kind(before) == BackconeLexer.PIPE)
                    && (isEnd(found) || kind(found) == BackconeLexer.PIPE);
            return empty
                    ? missingAt(
                            Code.MISSING_VALUE,
                            found,
                            "a cell of this row is empty: write its value, or remove the bar")
                    : missingOperand(before, found, "");
        }
        return clauseOrGeneral(failure, found, form);
    }

    // ---- entries that hold nothing readable

    private Diagnostic stray(Token found) {
        String text = found.getText();
        char c = text.isEmpty() ? ' ' : text.charAt(0);
        if (c == '{') {
            return at(
                    Code.SYNTAX,
                    found,
                    "this `{` has nothing before it: a block starts with its kind and name, as in `shaft motor { … }`");
        }
        if (c == '"') {
            return at(
                    Code.SYNTAX,
                    found,
                    "a text can't stand alone: give it a name, as in `note = " + shortened(text)
                            + "`, or start the line with `#`");
        }
        if (Character.isDigit(c)) {
            return at(
                    Code.SYNTAX,
                    found,
                    "a line starts with a name, not with " + Forms.quoted(text)
                            + ": write what it is the value of, as in `teeth = 18`");
        }
        if (Character.isLetter(c)) {
            return at(
                    Code.SYNTAX,
                    found,
                    "`" + text
                            + "` is a word of the language and can't start a line: names may be anything but "
                            + "`in`, `and`, `or`, `not`, `else`, `each`, `choose`");
        }
        if (c == ')') {
            return at(Code.SYNTAX, found, "this `)` closes nothing: remove it, or write the missing `(`");
        }
        return at(
                Code.SYNTAX,
                found,
                "a line can't start with " + Forms.quoted(text)
                        + " here: write a name before it, as in `name = value`");
    }

    private String shortened(String text) {
        return text.length() > 30 ? text.substring(0, 28) + "…\"" : text;
    }

    // ---- values

    /** An expression was expected: in an expression, or right behind {@code =} in a value. */
    private static boolean isOperandMissing(Recovery.Failure failure) {
        int rule = failure.rule().getRuleIndex();
        return (rule == BackconeParser.RULE_operand
                        || rule == BackconeParser.RULE_sum
                        || rule == BackconeParser.RULE_compare
                        || rule == BackconeParser.RULE_value
                        || rule == BackconeParser.RULE_expr
                        || rule == BackconeParser.RULE_arg)
                && failure.expected().contains(BackconeLexer.NUMBER);
    }

    private Diagnostic missingValue(ParserRuleContext item, Token found) {
        Token before = before(found);
        String name = nameOf(item);
        int kind = kind(item.getStart());
        if (kind(before) == BackconeLexer.ASSIGN && before.getTokenIndex() == signOf(item)) {
            String what =
                    kind == BackconeLexer.CHECK || kind == BackconeLexer.FUNCTION || kind == BackconeLexer.DECLARATION
                            ? "the equation of `" + name + "`"
                            : "the value of `" + name + "`";
            return missingOrWrong(before, found, what, kind == BackconeLexer.FACT ? factExample(name) : "");
        }
        if (kind == BackconeLexer.REQUIREMENT && isComparison(kind(before))) {
            String value = Forms.valueFor(name.substring(name.lastIndexOf('.') + 1));
            String example = name + " " + before.getText() + " " + (value == null ? "1.4" : value);
            return missingOrWrong(
                    before, found, "the limit of `" + name + "`", ": write a number, for example `" + example + "`");
        }
        if (isComparison(kind(before))) {
            return missingOperand(before, found, "the value to compare with");
        }
        return missingOperand(before, found, "");
    }

    private static String factExample(String name) {
        String value = Forms.valueFor(name.substring(name.lastIndexOf('.') + 1));
        if (value == null) {
            return ": write a number with its unit, a word or a text, for example `face_width = 36 mm`";
        }
        String form = Character.isDigit(value.charAt(0))
                ? value.indexOf(' ') > 0 ? "a number with its unit" : "a number"
                : value.charAt(0) == '"' ? "a text" : "a name";
        return ": write " + form + ", for example `" + name + " = " + value + "`";
    }

    private Diagnostic missingOperand(Token before, Token found, String what) {
        String clause = Forms.clause(kind(before));
        String missing = what.isEmpty() ? "a value" : what;
        String example = clause == null
                ? ": write a number with its unit, a name or a bracket"
                : ": write for example `" + clause + "`";
        return missingOrWrong(before, found, missing, example);
    }

    private Diagnostic missingOrWrong(Token before, Token found, String what, String next) {
        String place = isMarker(before) ? "" : " after " + Forms.quoted(before);
        if (isEnd(found) || kind(found) == BackconeLexer.RPAREN || Forms.isWord(kind(found))) {
            if (isReserved(found)) {
                return at(
                        Code.SYNTAX,
                        found,
                        "`" + found.getText() + "` is a word of the language and can't stand for " + what
                                + ": use another name");
            }
            return missingAt(Code.MISSING_VALUE, found, what + " is missing" + place + next);
        }
        String twisted = twisted(before, found);
        if (twisted != null) {
            return Diagnostic.of(
                            Code.SYNTAX,
                            file,
                            Places.of(before).to(Places.of(found)),
                            "`" + before.getText() + found.getText() + "` is written `" + twisted + "`")
                    .withFix("write `" + twisted + "`", Places.of(before).to(Places.of(found)), twisted);
        }
        return at(Code.SYNTAX, found, "found " + Forms.found(found) + " where " + what + " should start" + next);
    }

    /** {@code =<}, {@code =>=}, {@code <>}: signs written the other way round. */
    private static @Nullable String twisted(Token before, Token found) {
        if (before.getStopIndex() + 1 != found.getStartIndex()) {
            return null;
        }
        return switch (before.getText() + found.getText()) {
            case "=<" -> "<=";
            case "=>", "=>=" -> ">=";
            case "<>", "=!" -> "!=";
            case "===" -> "==";
            case "**" -> "^";
            default -> null;
        };
    }

    private Diagnostic path(Token found) {
        Token before = before(found);
        if (kind(before) == BackconeLexer.DOT) {
            String name = pathBefore(before);
            return missingAt(
                    Code.SYNTAX,
                    found,
                    "after `" + name + ".` a name is missing: write the property that is meant, for example `" + name
                            + ".teeth`");
        }
        return missingAt(
                Code.SYNTAX,
                found,
                "a name is missing after " + Forms.quoted(before) + "; found " + Forms.found(found));
    }

    private String pathBefore(Token dot) {
        int index = dot.getTokenIndex() - 1;
        String text = "";
        while (index >= 0) {
            Tok t = tokens.get(index);
            if (kind(t) != BackconeLexer.NAME && kind(t) != BackconeLexer.DOT) {
                break;
            }
            text = t.getText() + text;
            index--;
        }
        return text;
    }

    // ---- facts, declarations, blocks

    private Diagnostic missingAssign(ParserRuleContext item, Token found) {
        String name = nameOf(item);
        if (isEnd(found) || kind(found) == BackconeLexer.LBRACE) {
            if (name.indexOf('.') >= 0 && kind(found) == BackconeLexer.LBRACE) {
                return at(
                        Code.SYNTAX,
                        found,
                        "`" + name + "` can't open a block: write the blocks inside each other, one name each");
            }
            String value = Forms.valueFor(name.substring(name.lastIndexOf('.') + 1));
            return missingAt(
                    Code.MISSING_VALUE,
                    found,
                    "`" + name + "` stands alone: give it a value, as in `" + name + " = "
                            + (value == null ? "…" : value) + "`"
                            + (name.indexOf('.') < 0 ? ", or a body, `" + name + " { … }`" : ""));
        }
        if (kind(found) == BackconeLexer.ARROW) {
            return at(
                            Code.SYNTAX,
                            found,
                            "`=>` belongs in `choose { … }`; a requirement is written `" + name + " >= …`, a value `"
                                    + name + " = …`")
                    .withFix("write `>=`", Places.of(found), ">=");
        }
        if (kind(found) == BackconeLexer.LPAREN) {
            return at(
                    Code.SYNTAX,
                    found,
                    "`" + name + "( … )` can't stand alone: give its value a name, `let x = " + name + "( … )`");
        }
        Span gap = behind(found);
        String example = isOperand(found) ? name + " = " + lineFrom(found) : name + " = …";
        return Diagnostic.of(
                        Code.SYNTAX,
                        file,
                        Places.of(found),
                        "`=` is missing between `" + name + "` and " + Forms.found(found) + ": write `" + example + "`")
                .withFix("write `=`", gap, " =");
    }

    private @Nullable Diagnostic declaration(ParserRuleContext item, Recovery.Failure failure, Token found) {
        String name = nameOf(item);
        Token before = before(found);
        if (kind(before) == BackconeLexer.COLON && kind(found) == BackconeLexer.ASSIGN) {
            Span sign = Places.of(before).to(Places.of(found));
            if (sign.length() == 2) {
                return Diagnostic.of(Code.SYNTAX, file, sign, "`:=` is written `=`: write `" + name + " = …`")
                        .withFix("write `=`", sign, "=");
            }
        } else if (kind(before) == BackconeLexer.COLON && isValueStart(found)) {
            return at(
                            Code.SYNTAX,
                            found,
                            "a value is given with `=`: write `" + name + " = " + lineFrom(found)
                                    + "` (a `:` is followed by a kind, as in `" + name + " : Length`)")
                    .withFix("write `=`", Places.of(before), "=");
        }
        if (kind(before) == BackconeLexer.COLON) {
            return missingAt(
                    Code.SYNTAX,
                    found,
                    "the kind of `" + name + "` is missing after `:`: write for example `" + name + " : Length`");
        }
        if (failure.expected().contains(BackconeLexer.COLON)) {
            return missingAt(
                    Code.SYNTAX,
                    found,
                    "the kind of `" + name + "` is missing before " + Forms.found(found)
                            + ": a declaration reads `name symbol \"meaning\" : Kind = …`");
        }
        return null;
    }

    private Diagnostic leftOver(ParserRuleContext item, Token found) {
        int kind = kind(item.getStart());
        String text = found.getText();
        if (kind == BackconeLexer.BLOCK && text.equals("from")) {
            return at(
                    Code.SYNTAX,
                    found,
                    "a block has no `from … to …`: its members say where they sit, `pinion on SHAFT { … }` and"
                            + " `wheel on SHAFT { … }`");
        }
        if (kind == BackconeLexer.BLOCK) {
            return at(
                    Code.SYNTAX,
                    found,
                    Forms.quoted(found) + " has no place in the head of a block, which reads `" + Forms.entry(kind)
                            + "`: remove it, or put it inside the braces");
        }
        if (text.equals("{")) {
            return at(Code.SYNTAX, found, "this entry has no body: remove `{ … }`, or end the line before it");
        }
        return leftOverIn(null, found);
    }

    private Diagnostic leftOverIn(@Nullable String form, Token found) {
        Token before = before(found);
        String text = found.getText();
        char c = text.isEmpty() ? ' ' : text.charAt(0);
        if (c == ')') {
            return at(Code.SYNTAX, found, "this `)` closes nothing: remove it, or write the missing `(`");
        }
        boolean operand =
                (c == '(' || c == '"' || Character.isLetterOrDigit(c) || c == '_') && !Forms.isWord(kind(found));
        boolean unitWord = operand && Character.isLetter(c) && text.length() <= 4;
        if (kind(before) == BackconeLexer.UNIT && unitWord && form == null) {
            return at(
                    Code.SYNTAX,
                    found,
                    "a unit holds no blanks: write `" + before.getText() + "*" + text + "` if `" + text
                            + "` belongs to the unit, or start a new line");
        }
        if (operand && isOperand(before) && form == null) {
            return at(
                    Code.MISSING_OPERATOR,
                    found,
                    Forms.quoted(before) + " and " + Forms.quoted(found)
                            + " stand side by side: write an operator between them, or start a new line");
        }
        String end = form == null ? "the entry ends here" : form;
        return at(
                Code.SYNTAX,
                found,
                "found " + Forms.quoted(found) + " after " + Forms.quoted(before) + ", but " + end
                        + ": remove it, or start a new line");
    }

    // ---- all other entries

    private Diagnostic incomplete(ParserRuleContext item, Recovery.Failure failure, Token found) {
        int kind = kind(item.getStart());
        String form = Forms.entry(kind);
        return clauseOrGeneral(failure, found, form == null ? "" : "the entry reads `" + form + "`");
    }

    private Diagnostic clauseOrGeneral(Recovery.Failure failure, Token found, String form) {
        Token before = before(found);
        String clause = Forms.clause(kind(before));
        int rule = failure.rule().getRuleIndex();
        boolean inClause = clause != null
                && (rule == BackconeParser.RULE_note
                        || rule == BackconeParser.RULE_text
                        || rule == BackconeParser.RULE_taken
                        || rule == BackconeParser.RULE_rowWord
                        || rule == BackconeParser.RULE_value
                        || rule == BackconeParser.RULE_expr
                        || rule == BackconeParser.RULE_operand
                        || rule == BackconeParser.RULE_rateWord);
        String expected = Forms.expected(failure.expected());
        if (inClause) {
            String what = expected == null ? "something" : expected;
            return missingAt(
                    Code.SYNTAX,
                    found,
                    "after `" + before.getText() + "` " + what + " is missing"
                            + (isEnd(found) ? "" : " (found " + Forms.found(found) + ")") + ": write for example `"
                            + clause
                            + "`");
        }
        String next = form.isEmpty() ? "" : "; " + form;
        if (expected == null && clause != null) {
            return missingAt(
                    Code.MISSING_VALUE,
                    found,
                    "a value is missing after `" + before.getText() + "`: write for example `" + clause + "`");
        }
        if (expected == null) {
            return at(Code.SYNTAX, found, "found " + Forms.found(found) + " after " + Forms.quoted(before) + next);
        }
        String place = isMarker(before) ? "" : " after " + Forms.quoted(before);
        return isEnd(found)
                ? missingAt(Code.SYNTAX, found, expected + " is missing" + place + next)
                : at(Code.SYNTAX, found, "found " + Forms.found(found) + " where " + expected + " is expected" + next);
    }

    // ---- places and names

    /** The name the entry is about: the path of a fact, the name behind an entry word. */
    private String nameOf(ParserRuleContext item) {
        int index = item.getStart().getTokenIndex();
        StringBuilder b = new StringBuilder();
        for (int k = index + 1; k < tokens.size(); k++) {
            Tok t = tokens.get(k);
            if ((kind(t) != BackconeLexer.NAME && kind(t) != BackconeLexer.DOT)
                    || (b.length() > 0 && kind(t) == BackconeLexer.NAME && b.charAt(b.length() - 1) != '.')) {
                break;
            }
            b.append(t.getText());
        }
        return b.length() > 0 && b.charAt(b.length() - 1) == '.' ? b.substring(0, b.length() - 1) : b.toString();
    }

    /** The index of the first {@code =} of an entry. */
    private int signOf(ParserRuleContext item) {
        int k = item.getStart().getTokenIndex();
        while (k < tokens.size() && tokens.get(k).getType() != BackconeLexer.ASSIGN) {
            k++;
        }
        return k;
    }

    /** What stands on the line from here on, shortened. */
    private String lineFrom(Token found) {
        StringBuilder b = new StringBuilder();
        Tok last = null;
        for (int k = found.getTokenIndex(); k < tokens.size() && b.length() < 30; k++) {
            Tok t = tokens.get(k);
            if (isEnd(t) || t.kind() == BackconeLexer.LBRACE) {
                break;
            }
            if (last != null && last.end() < t.start()) {
                b.append(' ');
            }
            b.append(t.getText());
            last = t;
        }
        return b.toString();
    }

    private static boolean isValueStart(Token t) {
        return switch (kind(t)) {
            case BackconeLexer.NUMBER,
                    BackconeLexer.STRING,
                    BackconeLexer.DATE,
                    BackconeLexer.MINUS,
                    BackconeLexer.PLUS,
                    BackconeLexer.LPAREN -> true;
            default -> false;
        };
    }

    private Token before(Token found) {
        int index = found.getTokenIndex() - 1;
        return index < 0 ? found : tokens.get(index);
    }

    private Span behind(Token found) {
        Token before = before(found);
        int end = before == found ? found.getStartIndex() : Math.max(before.getStartIndex(), before.getStopIndex() + 1);
        return new Span(end, end);
    }

    private static int kind(Token t) {
        return t instanceof Tok tok ? tok.kind() : t.getType();
    }

    private static boolean isMarker(Token t) {
        return t instanceof Tok tok && tok.isInserted();
    }

    private static boolean isEnd(Token t) {
        int type = kind(t);
        return type == BackconeLexer.NL
                || type == BackconeLexer.SEMI
                || type == BackconeLexer.RBRACE
                || type == Token.EOF;
    }

    private static boolean isComparison(int type) {
        return type >= BackconeLexer.EQ && type <= BackconeLexer.GT;
    }

    private static boolean isReserved(Token t) {
        return kind(t) >= BackconeLexer.IN && kind(t) <= BackconeLexer.CHOOSE && kind(t) != BackconeLexer.ELSE;
    }

    private static boolean isOperand(Token t) {
        return switch (kind(t)) {
            case BackconeLexer.NAME,
                    BackconeLexer.NUMBER,
                    BackconeLexer.UNIT,
                    BackconeLexer.STRING,
                    BackconeLexer.OPENSTRING,
                    BackconeLexer.DATE,
                    BackconeLexer.RPAREN -> true;
            default -> false;
        };
    }

    private Diagnostic at(Code code, Token where, String message) {
        Span span = isEnd(where) && kind(where) != BackconeLexer.RBRACE ? behind(where) : Places.of(where);
        return Diagnostic.of(code, file, span, message);
    }

    /** Something is missing before this token: the place right behind the one before it. */
    private Diagnostic missingAt(Code code, Token where, String message) {
        return Diagnostic.of(code, file, isEnd(where) ? behind(where) : Places.of(where), message);
    }
}
