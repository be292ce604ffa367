package backcone.engine.parse;

import backcone.grammar.Tok;
import backcone.grammar.gen.BackconeLexer;
import java.util.ArrayList;
import java.util.HashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import org.antlr.v4.runtime.Token;
import org.antlr.v4.runtime.misc.IntervalSet;
import org.jspecify.annotations.Nullable;

/** How entries and clauses read, and what an engineer calls the tokens. */
final class Forms {
    private static final Map<Integer, String> ENTRY = new HashMap<>();
    private static final Map<Integer, String> CLAUSE = new HashMap<>();
    private static final Map<Integer, String> TOKEN = new HashMap<>();

    static {
        ENTRY.put(BackconeLexer.FACT, "name = value");
        ENTRY.put(BackconeLexer.FACT_FOR, "tight_limit for CHECK = 3 %");
        ENTRY.put(BackconeLexer.REQUIREMENT, "CHECK >= 1.4");
        ENTRY.put(BackconeLexer.BLOCK, "KIND NAME on SHAFT \"title\" { … }");
        ENTRY.put(BackconeLexer.DECLARATION, "name symbol \"meaning\" : Kind = …");
        ENTRY.put(BackconeLexer.DRIVE, "drive NAME \"title\" { … }");
        ENTRY.put(BackconeLexer.USE, "use \"file.drive\"` or `use READING for NAME");
        ENTRY.put(BackconeLexer.LET, "let NAME = …");
        ENTRY.put(BackconeLexer.RATE, "rate MESH by METHOD edition 2014 as NAME under CASE { … }");
        ENTRY.put(BackconeLexer.REQUIRE, "require PATH >= 3 mm");
        ENTRY.put(BackconeLexer.ASSERT, "assert PATH == 16");
        ENTRY.put(BackconeLexer.OVERRIDE, "override NAME = 1.21 because \"…\"");
        ENTRY.put(BackconeLexer.ACCEPT, "accept PATH >= 1.00 until 2027-06-30 by \"…\" because \"…\"");
        ENTRY.put(BackconeLexer.WAIVE, "waive PATH until 2027-06-30 by \"…\" because \"…\"");
        ENTRY.put(BackconeLexer.VARIANT, "variant NAME of DRIVE { … }");
        ENTRY.put(BackconeLexer.FAMILY, "family NAME of DRIVE { rows }");
        ENTRY.put(BackconeLexer.QUANTITY, "quantity NAME in UNIT \"meaning\"");
        ENTRY.put(BackconeLexer.SOURCE, "source NAME \"title\"");
        ENTRY.put(BackconeLexer.CHOICE, "choice NAME \"meaning\" { words }");
        ENTRY.put(BackconeLexer.KIND, "kind NAME is OTHER \"meaning\" { … }");
        ENTRY.put(BackconeLexer.CHAPTER, "chapter NAME for KIND \"meaning\" { … }");
        ENTRY.put(BackconeLexer.METHOD, "method NAME for KIND \"meaning\" { … }");
        ENTRY.put(BackconeLexer.INCLUDE, "include METHOD, METHOD");
        ENTRY.put(BackconeLexer.FUNCTION, "function NAME(x : Kind) \"meaning\" : Kind = …");
        ENTRY.put(BackconeLexer.TABLE, "table NAME \"meaning\" by KEY : Kind { rows }");
        ENTRY.put(BackconeLexer.PARTS, "parts NAME, NAME : KIND as NAME");
        ENTRY.put(BackconeLexer.PART, "part NAME : KIND \"meaning\"");
        ENTRY.put(BackconeLexer.ROLE, "role NAME = …");
        ENTRY.put(BackconeLexer.COLLECT, "collect NAME = KIND where …");
        ENTRY.put(BackconeLexer.CASES, "cases NAME { word, word }");
        ENTRY.put(BackconeLexer.EACH_BLOCK, "each COLLECTION { … }");
        ENTRY.put(BackconeLexer.EDITIONS, "edition 2019, 2006");
        ENTRY.put(BackconeLexer.RELATION, "relation \"meaning\" : a * b == c");
        ENTRY.put(BackconeLexer.CHECK, "check NAME \"meaning\" = …");
        ENTRY.put(BackconeLexer.LIMIT, "limit NAME \"meaning\" : CONDITION else \"…\"");
        ENTRY.put(BackconeLexer.APPLIES, "applies when CONDITION else \"…\"");
        ENTRY.put(BackconeLexer.EXAMPLE, "example \"title\" per SOURCE { … }");
        ENTRY.put(BackconeLexer.GIVES, "gives NAME = 3.14 within 0.01 %");

        CLAUSE.put(BackconeLexer.PER, "per \"drawing 4412\"");
        CLAUSE.put(BackconeLexer.BECAUSE, "because \"…\"");
        CLAUSE.put(BackconeLexer.UNTIL, "until 2027-06-30");
        CLAUSE.put(BackconeLexer.BY, "by \"R. Falk\"");
        CLAUSE.put(BackconeLexer.ELSE, "else \"…\"");
        CLAUSE.put(BackconeLexer.TAKING, "taking v in m/s, b in mm");
        CLAUSE.put(BackconeLexer.READING, "reading NAME = …");
        CLAUSE.put(BackconeLexer.RANGE, "range 0.8 to 4");
        CLAUSE.put(BackconeLexer.ROWS, "rows linear, below hold, above refuse");
        CLAUSE.put(BackconeLexer.WORST, "worst low");
        CLAUSE.put(BackconeLexer.OFFER, "offer 0.3 * m_mn");
        CLAUSE.put(BackconeLexer.WITHIN, "within 3 %");
        CLAUSE.put(BackconeLexer.BETWEEN, "between 89 rpm and 95 rpm");
        CLAUSE.put(BackconeLexer.OF, "within 3 % of 92 rpm");
        CLAUSE.put(BackconeLexer.ON, "on 2026-03-02");
        CLAUSE.put(BackconeLexer.TOL, "112 mm tol -0.02 mm .. +0.05 mm");
        CLAUSE.put(BackconeLexer.EDITION, "edition 2014");
        CLAUSE.put(BackconeLexer.DEFAULT, "default 20 deg");
        CLAUSE.put(BackconeLexer.ROOT, "root of x == y between 1 and 5");
        CLAUSE.put(BackconeLexer.SETTLE, "settle x from 60 degC within 0.05 K at most 60");
        CLAUSE.put(BackconeLexer.CHOOSE, "choose WORD { word => value }");

        TOKEN.put(BackconeLexer.NAME, "a name");
        TOKEN.put(BackconeLexer.NUMBER, "a number");
        TOKEN.put(BackconeLexer.UNIT, "a unit");
        TOKEN.put(BackconeLexer.STRING, "a text in quotes");
        TOKEN.put(BackconeLexer.OPENSTRING, "a text in quotes");
        TOKEN.put(BackconeLexer.DATE, "a date such as `2027-06-30`");
        TOKEN.put(BackconeLexer.LBRACE, "`{ … }`");
        TOKEN.put(BackconeLexer.ROWS_OPEN, "`{ … }` with the rows of the table");
        TOKEN.put(BackconeLexer.ARMS_OPEN, "`{ … }` with the arms of the choice");
        TOKEN.put(BackconeLexer.WORDS_OPEN, "`{ … }` with its words");
        TOKEN.put(BackconeLexer.ASSIGN, "`=`");
        TOKEN.put(BackconeLexer.ARROW, "`=>`");
        TOKEN.put(BackconeLexer.EQ, "`==`");
        TOKEN.put(BackconeLexer.NE, "a comparison such as `>=`");
        TOKEN.put(BackconeLexer.LE, "a comparison such as `>=`");
        TOKEN.put(BackconeLexer.GE, "a comparison such as `>=`");
        TOKEN.put(BackconeLexer.LT, "a comparison such as `>=`");
        TOKEN.put(BackconeLexer.GT, "a comparison such as `>=`");
        TOKEN.put(BackconeLexer.COLON, "`:`");
        TOKEN.put(BackconeLexer.COMMA, "`,`");
        TOKEN.put(BackconeLexer.DOT, "`.`");
        TOKEN.put(BackconeLexer.DOTDOT, "`..`");
        TOKEN.put(BackconeLexer.LPAREN, "`(`");
        TOKEN.put(BackconeLexer.RPAREN, "`)`");
        TOKEN.put(BackconeLexer.EDITIONS, "`edition`");
        TOKEN.put(BackconeLexer.EACH_BLOCK, "`each`");
        TOKEN.put(BackconeLexer.RELATED, "`relation`");
    }

    private Forms() {}

    static @Nullable String entry(int type) {
        return ENTRY.get(type);
    }

    static @Nullable String clause(int type) {
        return CLAUSE.get(type);
    }

    /** True for words such as {@code per}, {@code of}, {@code when}; not for names. */
    static boolean isWord(int type) {
        return type >= BackconeLexer.DRIVE && type <= BackconeLexer.WHOLE;
    }

    /** What stands here, as an engineer would call it. */
    static String found(Token t) {
        return switch (t instanceof Tok tok ? tok.kind() : t.getType()) {
            case Token.EOF -> "the end of the text";
            case BackconeLexer.NL, BackconeLexer.SEMI -> "the end of the line";
            default -> quoted(t);
        };
    }

    /** The author's own text between back quotes, shortened. */
    static String quoted(Token t) {
        return quoted(t.getText());
    }

    static String quoted(String text) {
        String oneLine = text.replaceAll("\\s+", " ").strip();
        return "`" + (oneLine.length() > 40 ? oneLine.substring(0, 38) + "…" : oneLine) + "`";
    }

    /** Up to three of the things that could have stood here. */
    static @Nullable String expected(IntervalSet set) {
        List<String> names = new ArrayList<>();
        for (int type : set.toList()) {
            String name = TOKEN.get(type);
            if (name == null && isWord(type)) {
                name = "`" + BackconeLexer.VOCABULARY.getSymbolicName(type).toLowerCase(Locale.ROOT) + "`";
            }
            if (name != null && !names.contains(name)) {
                names.add(name);
            }
        }
        if (names.isEmpty() || names.size() > 3) {
            return null;
        }
        String last = names.get(names.size() - 1);
        return names.size() == 1 ? last : String.join(", ", names.subList(0, names.size() - 1)) + " or " + last;
    }

    /** A value as it might be written for a property of this name; null when the name tells nothing. */
    static @Nullable String valueFor(String name) {
        String[][] hints = {
            {"teeth", "18"},
            {"diametral_pitch", "7 1/in"},
            {"module", "5 mm"},
            {"roughness", "4 um"},
            {"angle", "20 deg"},
            {"hardness", "60 HRC"},
            {"viscosity", "220 mm^2/s"},
            {"temperature", "60 degC"},
            {"speed", "1480 rpm"},
            {"torque", "90 N*m"},
            {"power", "22 kW"},
            {"life", "20000 h"},
            {"time", "20 h"},
            {"factor", "1.25"},
            {"share", "50 %"},
            {"efficiency", "98 %"},
            {"ratio", "2.5"},
            {"accuracy", "6 ISO17485"},
            {"stress", "350 MPa"},
            {"density", "7.83 kg/dm^3"},
            {"modulus", "206 GPa"},
            {"width", "36 mm"},
            {"diameter", "80 mm"},
            {"radius", "95 mm"},
            {"distance", "112 mm"},
            {"length", "60 mm"},
            {"span", "110 mm"},
            {"material", "steel_42CrMo4"},
            {"hand", "left"},
            {"document", "\"GX-2041\""},
            {"title", "\"…\""}
        };
        for (String[] hint : hints) {
            if (name.contains(hint[0])) {
                return hint[1];
            }
        }
        return null;
    }
}
