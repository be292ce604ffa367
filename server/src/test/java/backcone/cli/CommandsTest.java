package backcone.cli;

import static org.assertj.core.api.Assertions.assertThat;

import com.networknt.schema.InputFormat;
import com.networknt.schema.SchemaRegistry;
import com.networknt.schema.SpecificationVersion;
import java.io.IOException;
import java.io.PrintWriter;
import java.io.StringWriter;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** Commands with their output and exit status. */
class CommandsTest {
    @TempDir
    @SuppressWarnings("NullAway.Init")
    Path dir;

    private record Ran(int status, String out, String err) {}

    private static Ran run(String... args) {
        StringWriter out = new StringWriter();
        StringWriter err = new StringWriter();
        int status = Main.run(args, new PrintWriter(out), new PrintWriter(err));
        return new Ran(status, out.toString(), err.toString());
    }

    private String file(String name, String text) throws IOException {
        Path p = dir.resolve(name);
        Files.createDirectories(p.getParent());
        Files.writeString(p, text);
        return p.toString();
    }

    private static String resource(String name) throws IOException {
        try (var in = CommandsTest.class.getResourceAsStream("/backcone/" + name)) {
            return new String(java.util.Objects.requireNonNull(in).readAllBytes(), StandardCharsets.UTF_8);
        }
    }

    private static void valid(String schema, String json) throws IOException {
        var errors = SchemaRegistry.withDefaultDialect(SpecificationVersion.DRAFT_2020_12)
                .getSchema(resource("schema/" + schema))
                .validate(json, InputFormat.JSON);
        assertThat(errors).as(json).isEmpty();
    }

    @Test
    void everyStarterIsACompleteSpecThatMeetsItsRequirements() throws IOException {
        for (String kind : StartCommand.kinds()) {
            Ran start = run("start", kind);
            assertThat(start.status()).isZero();
            assertThat(start.out()).contains("<-");
            Ran check = run("check", file(kind + ".drive", start.out()));
            assertThat(check.status()).as(check.out()).isZero();
            assertThat(check.out()).contains(Caution.TEXT);
        }
    }

    @Test
    void checkAnswersInJsonAfterItsSchema() throws IOException {
        Ran r = run("check", "--format", "json", file("a.drive", StartCommand.text("straight-bevel")));
        assertThat(r.status()).isZero();
        valid("check.schema.json", r.out());
        Ran wrong = run("check", "--format", "json", file("b.drive", "drive d { shaft a { speed = 12 }\n"));
        assertThat(wrong.status()).isEqualTo(2);
        valid("check.schema.json", wrong.out());
    }

    @Test
    void explainAnswersInJsonAfterItsSchema() throws IOException {
        String f = file("a.drive", StartCommand.text("straight-bevel"));
        Ran one = run("explain", "--format", "json", f, "head.lewis_buckingham.wear");
        assertThat(one.status()).as(one.err()).isZero();
        valid("explain.schema.json", one.out());
        Ran all = run("explain", "--format", "json", f, "head.lewis_buckingham");
        assertThat(all.status()).isZero();
        valid("explain.schema.json", all.out());
        assertThat(run("explain", f, "head.pinion.torque").out()).contains("torque");
        Ran unknown = run("explain", f, "head.pinion.torqe");
        assertThat(unknown.status()).isEqualTo(2);
        assertThat(unknown.err()).contains("Did you mean `head.pinion.torque`?");
    }

    @Test
    void exitStatusTellsWrongFromShort() throws IOException {
        String text = StartCommand.text("straight-bevel");
        assertThat(run(
                                "check",
                                file(
                                        "short.drive",
                                        text.replace("bending            >= 1.0", "bending            >= 100")))
                        .status())
                .isEqualTo(1);
        assertThat(run("check", file("open.drive", text.replace("service_factor = 1.25", "# ")))
                        .status())
                .isEqualTo(1);
        assertThat(run("check", file("wrong.drive", text.replace("480 rpm", "480 rmp")))
                        .status())
                .isEqualTo(2);
    }

    @Test
    void wrongUsageNamesTheNearestWord() {
        Ran r = run("chekc");
        assertThat(r.status()).isEqualTo(64);
        assertThat(r.err()).contains("Did you mean `check`?");
        assertThat(run("check", "--formt", "json").status()).isEqualTo(64);
        assertThat(run("check", "--format", "xml").status()).isEqualTo(64);
        assertThat(run("check", "--on", "yesterday").status()).isEqualTo(64);
        assertThat(run("start", "spurr").status()).isEqualTo(64);
    }

    @Test
    void filesThatCantBeReadGetAClearLine() throws IOException {
        assertThat(run("check", dir.resolve("nowhere.drive").toString()).err()).contains("there is no file or folder");
        Path latin = dir.resolve("latin.drive");
        Files.write(latin, new byte[] {'#', ' ', (byte) 0xe9, '\n'});
        Ran r = run("check", latin.toString());
        assertThat(r.status()).isEqualTo(2);
        assertThat(r.out()).contains("not UTF-8");
        assertThat(run("check", dir.toString()).status()).isEqualTo(2);
    }

    @Test
    void byteOrderMarkAndCarriageReturnsAreNothingSpecial() throws IOException {
        String text = "\ufeff" + StartCommand.text("spur").replace("\n", "\r\n");
        assertThat(run("check", file("crlf.drive", text)).status()).isZero();
    }

    @Test
    void usedFilesMayNotLeaveTheFolder() throws IOException {
        file("lib/m.drive", "material m { class = Eh }\n");
        Ran r = run("check", file("sub/a.drive", "use \"../../../../../../../../../../etc/passwd\"\ndrive d { }\n"));
        assertThat(r.status()).isEqualTo(2);
        assertThat(r.out()).contains("outside the opened folder");
    }

    @Test
    void theHandbookShowsBlocksMethodsChoicesAndUnits() {
        assertThat(run("handbook").out()).contains("lewis_buckingham", "bevel");
        assertThat(run("handbook", "bevel").out()).contains("outer_module");
        assertThat(run("handbook", "lewis_buckingham").out()).contains("beam strength");
        assertThat(run("handbook", "units").out()).contains("pound-force");
        assertThat(run("handbook", "bevvel").err()).contains("Did you mean `bevel`?");
    }
}
