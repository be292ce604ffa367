package backcone.engine.parse;

import static org.assertj.core.api.Assertions.assertThat;

import backcone.engine.diagnostics.Code;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.text.Span;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.FieldSource;

class ParserTest {

    @ParameterizedTest
    @FieldSource("backcone.engine.parse.Texts#NAMES")
    void everyFormOfTheLanguageIsRead(String name) {
        Parser.Parsed parsed = Parser.parse(Texts.id(name), Texts.read(name));
        assertThat(parsed.problems()).isEmpty();
        TreeText.walk(
                parsed.tree(),
                n -> assertThat(n).isNotInstanceOf(Expr.Hole.class).isNotInstanceOf(Entry.Bad.class));
    }

    /** Left: what stands in a drive. Right: its tree. */
    @ParameterizedTest
    @CsvSource(
            delimiterString = " ~ ",
            quoteCharacter = '\0',
            value = {
                // value forms
                "a = 5.00 mm ~ Fact(a, 5.00 mm)",
                "a = 58 HRC .. 62 HRC ~ Fact(a, Range(58 HRC, 62 HRC))",
                "a = 112 mm tol -0.02 mm .. +0.05 mm ~ Fact(a, Toleranced(112 mm, Neg(0.02 mm), 0.05 mm))",
                "a = 112 mm + 0.05 mm ~ Fact(a, (112 mm + 0.05 mm))",
                "a = 6 ISO17485 ~ Fact(a, 6 ISO17485)",
                "a = 11 AGMA_Q per \"x\" on 2026-02-11 ~ Fact(a, 11 AGMA_Q, [Per(\"x\", Day(\"2026-02-11\"))])",
                "a = \"A. Brandt\" on 2026-03-02 ~ Fact(a, Dated(Str(\"A. Brandt\"), Day(\"2026-03-02\")))",
                "pinion = gear sun ~ Fact(pinion, BlockRef(gear, sun))",
                "tight_limit for pitting = 3 % ~ FactFor(tight_limit, pitting, 3 %)",
                "a = +0.35 ~ Fact(a, 0.35)",
                "a = \"say \\\"so\\\" \\\\ \" ~ Fact(a, Str(\"say \"so\" \\ \"))",
                // units
                "a = 355 N/mm^2 ~ Fact(a, 355 N/mm^2)",
                "a = 355N/mm^2 ~ Fact(a, 355 N/mm^2)",
                "a = 20 N/(mm*um) ~ Fact(a, 20 N/(mm*um))",
                "a = 8 1/in ~ Fact(a, 8 1/in)",
                "a = 8 /in ~ Fact(a, 8 /in)",
                "a = 8 / n ~ Fact(a, (8 / n))",
                "a = 8 /n ~ Fact(a, (8 / n))",
                "a = 5 mm / t ~ Fact(a, (5 mm / t))",
                "a = 5 mm/s ~ Fact(a, 5 mm/s)",
                "a = 5 mm/(b + c) ~ Fact(a, (5 mm / (b + c)))",
                "a = 2 mm^-1 ~ Fact(a, 2 mm^-1)",
                "a = 20° ~ Fact(a, 20 °)",
                "a = 1.5 in ~ Fact(a, 1.5 in)",
                "a = x in m/s ~ Fact(a, In(x, m/s))",
                "a = 1.5 in in mm ~ Fact(a, In(1.5 in, mm))",
                "a = 3 per khurmi ~ Fact(a, 3, [Per(khurmi)])",
                // ranks of operators
                "a = 1 - 2 - 3 ~ Fact(a, ((1 - 2) - 3))",
                "a = 1 + 2 * 3 ~ Fact(a, (1 + (2 * 3)))",
                "a = 8 / 4 / 2 ~ Fact(a, ((8 / 4) / 2))",
                "a = -b^2 ~ Fact(a, Neg((b ^ 2)))",
                "a = 2^3^2 ~ Fact(a, (2 ^ (3 ^ 2)))",
                "a = 2^-b * c ~ Fact(a, ((2 ^ Neg(b)) * c))",
                "a = b or c and not d == e ~ Fact(a, (b or (c and Not(Compare([d, e], [==])))))",
                "a = 1 <= b < 8 ~ Fact(a, Compare([1, b, 8], [<=, <]))",
                "a = C_v(low).v1 * 2 ~ Fact(a, (Column(Call(C_v, [low]), v1) * 2))",
                "a = sum(each bin : D) ~ Fact(a, Call(sum, [Each(bin, D)]))",
                "a = count(each bin) ~ Fact(a, Call(count, [Each(bin)]))",
                "a = not given b ~ Fact(a, Not(Given(b)))",
                "a = choose x { u => 1; else => 2 } ~ Fact(a, Choose(x, [Arm(u, 1), Arm(2)]))",
                // keywords are names where a name can stand
                "table = 7 ~ Fact(table, 7)",
                "per >= 3 mm ~ Requirement(per, >=, 3 mm)",
                "at = motor ~ Fact(at, motor)",
                "drive.method = dip ~ Fact(drive.method, dip)",
                "a = from.n * to.n ~ Fact(a, (from.n * to.n))",
                "a = root ~ Fact(a, root)",
                "a = given ~ Fact(a, given)",
                "from : shaft = upstream(a, b) ~ Declaration(from, shaft, EQUALS, Call(upstream, [a, b]))",
                "part \"number\" : Text ~ Declaration(part, \"number\", Text, INPUT)",
                "method m \"how\" : Text ~ Declaration(method, m, \"how\", Text, INPUT)",
                "at a \"where\" : shaft ~ Declaration(at, a, \"where\", shaft, INPUT)",
                "on \"shaft\" : shaft ~ Declaration(on, \"shaft\", shaft, INPUT)",
                // blocks
                "shaft motor ~ Block(shaft, motor)",
                "pinion on motor { } ~ Block(pinion, motor)",
                "gear sun on pto \"x\" { a = 1 } ~ Block(gear, sun, pto, \"x\", [Fact(a, 1)])",
                "bin { a = 1; b = 2 } ~ Block(bin, [Fact(a, 1), Fact(b, 2)])",
                // entries of drives
                "use \"a.drive\" as lib ~ Use(\"a.drive\", lib)",
                "use fast for slope ~ UseReading(fast, slope)",
                "rate head by m ~ Rate(head, m)",
                "rate head by m edition 2014 as main under rated { a >= 1 } ~ Rate(head, m, 2014, main, rated, [Requirement(a, >=, 1)])",
                "require a >= 3 ~ Require(Compare([a, 3], [>=]))",
                "require a between 1 and 2 ~ Require(a, 1, 2)",
                "require a within 3 % of 92 rpm ~ Require(a, 3 %, 92 rpm)",
                "require a == b within 3 % ~ Require(Compare([a, b], [==]), [Within(3 %)])",
                "assert a == 16 ~ Assert(Compare([a, 16], [==]))",
                "override K = 1.2 because \"x\" ~ Override(K, 1.2, [Because(\"x\")])",
                "accept a.b >= 1.00 until 2027-06-30 by \"R. F\" because \"x\" ~ Accept(a.b, >=, 1.00, [Until(Day(\"2027-06-30\")), By(\"R. F\"), Because(\"x\")])",
                "waive a.b until 2027-06-30 ~ Waive(a.b, [Until(Day(\"2027-06-30\"))])",
                "a = 1 assumed because \"x\" ~ Fact(a, 1, [Assumed(\"x\")])",
                "a = 1 measured \"x\" ~ Fact(a, 1, [Measured(\"x\")])",
                // entries of handbooks
                "limit a \"x\" as error for b, c : d > 3 else \"y\" ~ Limit(a, \"x\", error, [b, c], Compare([d, 3], [>]), \"y\")",
                "part tool : tool \"x\" ~ Part(tool, tool, \"x\")",
                "a : Length worst low ~ Declaration(a, Length, INPUT, [Worst(low)])",
                "a : Power is load ~ Declaration(a, Power, INPUT, [Is(load)])",
                "a : Length needed \"x\" offer 0.3 * m_mn ~ Declaration(a, Length, INPUT, [Needed(\"x\"), Offer((0.3 * m_mn))])",
                "a : Length range 1 mm to 2 mm default 3 mm ~ Declaration(a, Length, DEFAULT, 3 mm, [InRange(1 mm, 2 mm)])",
                "a : Ratio = 2 per x, agreed reading y = 3 per z, recalled ~ Declaration(a, Ratio, EQUALS, 2, [Per(x, agreed), Reading(y, 3, [Per(z, recalled)])])",
                "edition 2019, 2006 ~ Edition([2019, 2006])",
                "cases a { b, c } ~ Cases(a, [b, c])",
                "relation when a > 3 : b * c == d ~ Relation(Compare([a, 3], [>]), Compare([(b * c), d], [==]))",
                "a : Ratio = root of x == 2 between 1 and 3 else \"no\" ~ Declaration(a, Ratio, EQUALS, Root(x, 2, 1, 3, \"no\"))",
                "a : T = settle b from 60 degC within 0.05 K at most 60 ~ Declaration(a, T, EQUALS, Settle(b, 60 degC, 0.05 K, 60))",
            })
    void oneEntry(String entry, String tree) {
        Parser.Parsed parsed = Texts.parseInDrive(entry);
        assertThat(parsed.problems()).isEmpty();
        Entry.Drive drive = (Entry.Drive) parsed.tree().entries().get(0);
        assertThat(drive.body()).hasSize(1);
        assertThat(TreeText.of(drive.body().get(0))).isEqualTo(tree);
    }

    @Test
    void aLineGoesOnWhereTheNextOneStartsWithAnOperatorOrAClause() {
        assertThat(tree("""
                a = 1
                    + 2
                    per "x"
                    because "y"
                b = f(1,
                      2)
                c = 3
                """)).isEqualTo("""
                Fact(a, (1 + 2), [Per("x"), Because("y")])
                Fact(b, Call(f, [1, 2]))
                Fact(c, 3)
                """);
    }

    @Test
    void aClauseWordThatIsANameStartsItsOwnLine() {
        assertThat(tree("""
                a = 1
                range = 2
                within >= 3
                from : shaft
                """)).isEqualTo("""
                Fact(a, 1)
                Fact(range, 2)
                Requirement(within, >=, 3)
                Declaration(from, shaft, INPUT)
                """);
    }

    @Test
    void aBraceMayStandOnTheNextLine() {
        assertThat(tree("shaft motor\n{\n  a = 1\n}\n")).isEqualTo("Block(shaft, motor, [Fact(a, 1)])\n");
    }

    @Test
    void placesCountUtf16Units() {
        String text = "# \uD83D\uDE00\na = \"\uD83D\uDE00\" per \"x\"\nb = 1\n";
        Parser.Parsed parsed = Texts.parse(text);
        Span span = parsed.tree().entries().get(1).span();
        assertThat(text.substring(span.start(), span.end())).isEqualTo("b = 1");
    }

    @Test
    void aByteOrderMarkAndCarriageReturnsAreNoPartOfTheText() {
        String text = "\uFEFFa = 1\r\nb = 2 mm\r\n";
        Parser.Parsed parsed = Texts.parse(text);
        assertThat(parsed.problems()).isEmpty();
        assertThat(TreeText.of(parsed.tree())).isEqualTo("Fact(a, 1)\nFact(b, 2 mm)\n");
        assertThat(parsed.tree().entries().get(0).span()).isEqualTo(new Span(1, 6));
    }

    @Test
    void commentsAreKeptApart() {
        Parser.Parsed parsed = Texts.parse("# one\na = 1 # two { \"\n");
        assertThat(parsed.problems()).isEmpty();
        assertThat(TreeText.of(parsed.tree())).isEqualTo("Fact(a, 1)\n# one\n# two { \"\n");
    }

    @Test
    void spansCoverTheBracketsOfAnOperand() {
        String text = "a = (b + c) * (d - e)\n";
        Entry.Fact fact = (Entry.Fact) Texts.parse(text).tree().entries().get(0);
        Span span = fact.value().span();
        assertThat(text.substring(span.start(), span.end())).isEqualTo("(b + c) * (d - e)");
    }

    @Test
    void aTextTooLongIsNotRead() {
        Parser.Parsed parsed = Texts.parse(" ".repeat(Parser.MOST_CHARACTERS + 1));
        assertThat(parsed.problems()).singleElement().extracting(d -> d.code()).isEqualTo(Code.TOO_LONG);
    }

    private static String tree(String text) {
        Parser.Parsed parsed = Texts.parse(text);
        assertThat(parsed.problems()).isEmpty();
        return TreeText.of(parsed.tree());
    }
}
