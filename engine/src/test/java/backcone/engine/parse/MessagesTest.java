package backcone.engine.parse;

import static org.assertj.core.api.Assertions.assertThat;

import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.syntax.Entry;
import java.util.ArrayList;
import java.util.List;
import java.util.regex.Pattern;
import java.util.stream.Stream;
import org.junit.jupiter.api.DynamicTest;
import org.junit.jupiter.api.TestFactory;

/**
 * The common mistakes, one by one, from {@code messages.txt}. A block of it holds the lines as typed, after {@code >},
 * and what is said: code, the text that is marked, message, and after {@code fix} what each fix writes.
 */
class MessagesTest {
    private static final Pattern BLANK_LINE = Pattern.compile("\n\n+");
    private static final String BEFORE = "drive d {\n  before = 1\n";
    private static final String AFTER = "  after = 2\n}\n";

    @TestFactory
    Stream<DynamicTest> mistakes() {
        List<DynamicTest> tests = new ArrayList<>();
        for (String block : BLANK_LINE.split(Texts.read("messages.txt"))) {
            StringBuilder typed = new StringBuilder();
            StringBuilder said = new StringBuilder();
            for (String line : block.lines().toList()) {
                if (line.startsWith("> ")) {
                    typed.append("  ").append(line.substring(2)).append('\n');
                } else if (!line.startsWith("#")) {
                    said.append(line).append('\n');
                }
            }
            if (typed.length() > 0) {
                tests.add(DynamicTest.dynamicTest(
                        typed.toString().strip(), () -> check(typed.toString(), said.toString())));
            }
        }
        return tests.stream();
    }

    private static void check(String typed, String said) {
        String text = BEFORE + typed + AFTER;
        Parser.Parsed parsed = Texts.parse(text);
        StringBuilder b = new StringBuilder();
        for (Diagnostic d : parsed.problems()) {
            b.append(d.code())
                    .append(" [")
                    .append(text, d.span().start(), d.span().end())
                    .append("] ")
                    .append(d.message())
                    .append('\n');
            d.fixes().forEach(f -> b.append("fix [").append(f.newText()).append("]\n"));
        }
        assertThat(b.toString()).isEqualTo(said);
        Entry.Drive drive = (Entry.Drive) parsed.tree().entries().get(0);
        assertThat(TreeText.of(drive.body().get(0))).isEqualTo("Fact(before, 1)");
        assertThat(TreeText.of(drive.body().get(drive.body().size() - 1))).isEqualTo("Fact(after, 2)");
    }
}
