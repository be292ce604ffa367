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
import java.nio.file.attribute.PosixFilePermissions;
import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** Commands with their output and exit status. */
class CommandsTest {
    @TempDir
    @SuppressWarnings("NullAway.Init")
    Path dir;

    record Ran(int status, String out, String err) {}

    static Ran run(String... args) {
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

    private static String bevel() throws IOException {
        return StartCommand.text("straight-bevel");
    }

    // ---- check

    @Test
    void everyStarterIsACompleteSpecThatMeetsItsRequirements() throws IOException {
        for (String kind : StartCommand.KINDS) {
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
        Ran r = run("check", "--format", "json", file("a.drive", bevel()));
        assertThat(r.status()).isZero();
        valid("check.schema.json", r.out());
        Ran wrong = run("check", "--format=json", file("b.drive", "drive d { shaft a { speed = 12 }\n"));
        assertThat(wrong.status()).isEqualTo(2);
        valid("check.schema.json", wrong.out());
        Ran none = run("check", "--format", "json", dir.resolve("nowhere").toString());
        assertThat(none.status()).isEqualTo(2);
        valid("check.schema.json", none.out());
    }

    @Test
    void jsonNamesTheFileOfARequirementThatStandsElsewhere() throws IOException {
        file("base.drive", bevel());
        String variant = file("variant.drive", "use \"base.drive\"\nvariant other of my_bevel_drive \"Other\" { }\n");
        Ran r = run("check", "--format", "json", variant);
        valid("check.schema.json", r.out());
        assertThat(r.out()).contains("\"path\" : \"" + dir.resolve("base.drive") + "\"");
        assertThat(run("check", variant).out()).doesNotContain("variant.drive:2:1 ");
    }

    @Test
    void exitStatusTellsWrongFromShort() throws IOException {
        String text = bevel();
        Ran shortOne = run("check", file("short.drive", text.replace("bending >= 1.0", "bending >= 100")));
        assertThat(shortOne.status()).isEqualTo(1);
        assertThat(shortOne.out()).containsPattern("short +head\\.\\S+bending .* governs +\\S+short\\.drive:\\d+:\\d+");
        Ran open = run("check", file("open.drive", text.replace("service_factor = 1.25", "# ")));
        assertThat(open.status()).isEqualTo(1);
        assertThat(open.out()).contains("head.lewis_buckingham: needs ");
        Ran wrong = run("check", file("wrong.drive", text.replace("480 rpm", "480 rmp")));
        assertThat(wrong.status()).isEqualTo(2);
        assertThat(wrong.out()).contains("rpm", "^^^");
    }

    @Test
    void whatFallsShortStandsFirst() throws IOException {
        Ran r = run("check", file("a.drive", bevel().replace("wear >= 1.0", "wear >= 9")));
        assertThat(r.out().indexOf(" short ")).isPositive().isLessThan(r.out().indexOf(" clear "));
    }

    @Test
    void aFolderIsReadWithoutWhatIsHiddenBuiltOrMarked() throws IOException {
        file("a.drive", bevel());
        for (String skipped : List.of(".git/x.drive", "target/x.drive", "node_modules/x.drive", "broken/x.drive")) {
            file(skipped, "nonsense");
        }
        file("broken/.backcone-skip", "");
        file("notes.txt", "nonsense");
        Files.createSymbolicLink(dir.resolve("loop"), dir);
        Ran r = run("check", dir.toString());
        assertThat(r.status()).as(r.out()).isZero();
        assertThat(r.out()).contains("1 file, 1 drive");
        assertThat(run("check", dir.resolve("broken").toString()).status()).isEqualTo(2);
    }

    @Test
    void quietTellsOnlyWhatIsAmiss() throws IOException {
        file("fine.drive", bevel());
        file("short.drive", bevel().replace("wear >= 1.0", "wear >= 9"));
        Ran r = run("check", "--quiet", dir.toString());
        assertThat(r.status()).isEqualTo(1);
        assertThat(r.out())
                .contains("short.drive", " short ")
                .doesNotContain("fine.drive")
                .doesNotContain(" clear  ");
    }

    @Test
    void oneMissingFileDoesNotHideTheOthers() throws IOException {
        Ran r = run("check", dir.resolve("nowhere.drive").toString(), file("a.drive", bevel()));
        assertThat(r.status()).isEqualTo(2);
        assertThat(r.err()).contains("there is no file or folder");
        assertThat(r.out()).contains(" clear ", "1 not found");
    }

    @Test
    void filesThatCantBeReadGetAClearLine() throws IOException {
        Path latin = dir.resolve("latin.drive");
        Files.write(latin, new byte[] {'#', ' ', (byte) 0xe9, '\n'});
        Ran r = run("check", latin.toString());
        assertThat(r.status()).isEqualTo(2);
        assertThat(r.out()).contains("not UTF-8");
        Files.delete(latin);
        assertThat(run("check", dir.toString()).err()).contains("no spec (.drive) here");
        assertThat(run("check", dir.toString()).status()).isEqualTo(2);
        assertThat(run("check", "a\0b").status()).isEqualTo(2);
    }

    @Test
    void byteOrderMarkAndCarriageReturnsAreNothingSpecial() throws IOException {
        String text = "\ufeff" + StartCommand.text("spur").replace("\n", "\r\n");
        assertThat(run("check", file("crlf.drive", text)).status()).isZero();
    }

    @Test
    void fiveMegabytesAreAnsweredAndMoreThanSixteenRefused() throws IOException {
        String filler = "# " + "x".repeat(97) + "\n";
        Ran large = run("check", file("large.drive", bevel() + filler.repeat(52_500)));
        assertThat(large.status()).isIn(0, 2);
        assertThat(large.err()).isEmpty();
        Ran huge = run("check", file("huge.drive", filler.repeat(170_000)));
        assertThat(huge.status()).isEqualTo(2);
        assertThat(huge.out()).contains("larger than 16 MB");
    }

    @Test
    void usedFilesMayNotLeaveTheFolder() throws IOException {
        Ran r = run("check", file("sub/a.drive", "use \"../../../../../../../../../../etc/passwd\"\ndrive d { }\n"));
        assertThat(r.status()).isEqualTo(2);
        assertThat(r.out()).contains("outside the opened folder");
        Path outside = Files.createTempFile("elsewhere", ".drive");
        Files.writeString(outside, "material m { class = Eh }\n");
        Files.createSymbolicLink(dir.resolve("sub/link.drive"), outside);
        Ran link = run("check", file("sub/b.drive", "use \"link.drive\"\ndrive d { }\n"));
        assertThat(link.status()).isEqualTo(2);
        assertThat(link.out()).contains("leads out of the opened folder");
        Files.delete(outside);
    }

    @Test
    void aRepositoryIsOneOpenedFolder() throws IOException {
        Files.createDirectories(dir.resolve("repo/.git"));
        file("repo/library/m.drive", "material m \"m\" {\n  class = Eh\n}\n");
        Ran r = run("check", file("repo/drives/a.drive", "use \"../library/m.drive\"\n" + bevel()));
        assertThat(r.status()).as(r.out()).isZero();
    }

    @Test
    void acceptancesAreJudgedByTheDayAsked() throws IOException {
        String f = file(
                "a.drive",
                bevel().replace("wear >= 1.0", "wear >= 9")
                        .replace(
                                "  require ",
                                "  accept head.lewis_buckingham.wear >= 0.1 until 2027-06-30 by \"R. Falk\" because \"trial\"\n"
                                        + "  require "));
        Ran before = run("check", "--on", "2027-06-01", f);
        assertThat(before.status()).as(before.out()).isZero();
        assertThat(before.out()).contains("accepted", "until 2027-06-30 by R. Falk because trial");
        Ran after = run("check", "--on", "2027-07-01", f);
        assertThat(after.status()).isEqualTo(1);
        assertThat(after.out()).contains("ended on 2027-06-30");
    }

    // ---- explain, handbook

    @Test
    void explainAnswersInJsonAfterItsSchema() throws IOException {
        String f = file("a.drive", bevel());
        Ran one = run("explain", "--format", "json", f, "head.lewis_buckingham.wear");
        assertThat(one.status()).as(one.err()).isZero();
        valid("explain.schema.json", one.out());
        assertThat(one.out()).containsOnlyOnce("\"sensitivities\"");
        Ran all = run("explain", "--format", "json", f, "head.lewis_buckingham");
        assertThat(all.status()).isZero();
        valid("explain.schema.json", all.out());
        assertThat(run("explain", f, "head.pinion.torque").out()).contains("torque");
        Ran unknown = run("explain", f, "head.pinion.torqe");
        assertThat(unknown.status()).isEqualTo(64);
        assertThat(unknown.err()).contains("Did you mean `head.pinion.torque`?");
        assertThat(run("explain", dir.resolve("nowhere.drive").toString(), "x").status())
                .isEqualTo(2);
    }

    @Test
    void aWholeRatingEndsWithItsVerdicts() throws IOException {
        String f = file("a.drive", bevel());
        for (String format : List.of("text", "markdown")) {
            String out = run("explain", "--format", format, f, "head.lewis_buckingham")
                    .out();
            assertThat(out).contains("Given", "Computed, in order", "Required", "required >= 1", Caution.TEXT);
        }
    }

    @Test
    void anExplanationEndsWithTheNumbersItHangsOnMost() throws IOException {
        String f = file("a.drive", bevel());
        String text = run("explain", f, "head.wheel.torque").out();
        assertThat(text).containsPattern("most sensitive to: (\\S+ [+−]1 %(, )?){3} \\(for 1 % more\\)");
        assertThat(run("explain", "--format", "markdown", f, "head.wheel.torque")
                        .out())
                .contains("most sensitive to: `");
        // a number that is written hangs on nothing else
        assertThat(run("explain", f, "head.pinion.teeth").out()).doesNotContain("most sensitive");
    }

    @Test
    void aDepthLimitsHowFarAnExplanationGoes() throws IOException {
        String f = file("a.drive", bevel());
        String flat =
                run("explain", "--depth", "0", f, "head.lewis_buckingham.wear").out();
        assertThat(flat.lines().count()).isLessThan(10);
        assertThat(run("explain", "--depth", "-1", f, "head.lewis_buckingham.wear")
                        .status())
                .isEqualTo(64);
    }

    @Test
    void theHandbookShowsBlocksMethodsChoicesUnitsAndCodes() {
        assertThat(run("handbook").out()).contains("lewis_buckingham", "bevel");
        assertThat(run("handbook", "bevel").out()).contains("outer_module");
        assertThat(run("handbook", "lewis_buckingham").out()).contains("beam strength");
        assertThat(run("handbook", "units").out()).contains("pound-force");
        assertThat(run("handbook", "bc3001").out()).contains("BC3001", "without its unit");
        Ran unknown = run("handbook", "bevvel");
        assertThat(unknown.status()).isEqualTo(64);
        assertThat(unknown.err()).contains("Did you mean `bevel`?");
    }

    // ---- format

    @Test
    void formatWritesWholeFilesAndKeepsTheirPermissions() throws IOException {
        String untidy = bevel().replace("    teeth", " teeth").replace("  shaft", "shaft");
        String f = file("a.drive", untidy);
        Files.setPosixFilePermissions(Path.of(f), PosixFilePermissions.fromString("rw-r-----"));
        assertThat(run("format", "--check", f).status()).isEqualTo(1);
        assertThat(Files.readString(Path.of(f))).isEqualTo(untidy);
        assertThat(run("format", f).status()).isZero();
        assertThat(Files.readString(Path.of(f))).isNotEqualTo(untidy);
        assertThat(PosixFilePermissions.toString(Files.getPosixFilePermissions(Path.of(f))))
                .isEqualTo("rw-r-----");
        assertThat(run("format", "--check", f).status()).isZero();
        assertThat(run("check", f).status()).isZero();
        try (var all = Files.list(dir)) {
            assertThat(all).hasSize(1);
        }
    }

    @Test
    void formatLeavesAFileWithMistakesAsItIs() throws IOException {
        String wrong = "drive d {\n      shaft a { speed = }\n";
        String f = file("a.drive", wrong);
        Ran r = run("format", f);
        assertThat(r.status()).isEqualTo(2);
        assertThat(r.err()).contains("a.drive:", "left as it is");
        assertThat(Files.readString(Path.of(f))).isEqualTo(wrong);
    }

    @Test
    void startersAreInCanonicalLayout() throws IOException {
        for (String kind : StartCommand.KINDS) {
            file(kind + ".drive", StartCommand.text(kind));
        }
        Ran r = run("format", "--check", dir.toString());
        assertThat(r.status()).as(r.out()).isZero();
    }

    // ---- usage

    @Test
    void wrongUsageNamesTheNearestWord() {
        Ran r = run("chekc");
        assertThat(r.status()).isEqualTo(64);
        assertThat(r.err()).contains("Did you mean `check`?");
        assertThat(run("check", "--formt", "json").err()).contains("Did you mean `--format`?");
        assertThat(run("check", "--format", "jsom").err()).contains("Did you mean `json`?");
        assertThat(run("check", "--format").err()).contains("needs a value");
        assertThat(run("check", "--quiet=yes").err()).contains("takes no value");
        assertThat(run("check", "--on", "yesterday").err()).contains("is no date");
        assertThat(run("start", "spurr").err()).contains("Did you mean `spur`?");
        assertThat(run("start", "spur", "more").err()).contains("one word too many");
        assertThat(run("explain", "a.drive").err()).contains("needs NAME");
        assertThat(run("feeder.drive").err()).contains("backcone check feeder.drive");
        for (String[] line : new String[][] {
            {"check", "--formt", "json"},
            {"check", "--format", "xml"},
            {"check", "--on", "2026-02-30"},
            {"start", "spurr"},
            {"explain"},
            {"--verson"}
        }) {
            assertThat(run(line).status()).as(String.join(" ", line)).isEqualTo(64);
        }
    }

    @Test
    void helpFitsATerminalAndItsExamplesAreRead() throws WrongUsage {
        assertThat(run().out()).isEqualTo(run("--help").out()).contains(Caution.TEXT.substring(0, 40));
        for (Command c : Main.commands()) {
            String name = c.usage().name();
            String help = run(name, "--help").out();
            assertThat(help).isEqualTo(run("help", name).out());
            assertThat(help.lines()).allMatch(l -> l.length() <= Usage.WIDTH);
            for (String e : c.usage().examples()) {
                List<String> words = List.of(
                        e.replaceAll("\\s{2,}.*", "").replaceAll(" > .*", "").split(" ", -1));
                assertThat(words).startsWith("backcone");
                if (words.get(1).equals(name)) {
                    Arguments.read(c.usage(), words.subList(2, words.size()));
                }
            }
        }
    }

    @Test
    void theVersionIsThatOfTheBuild() throws IOException {
        assertThat(run("--version").out()).isEqualTo("backcone " + Version.TEXT + System.lineSeparator());
        assertThat(Files.readString(Path.of("pom.xml"))).contains("<version>" + Version.TEXT + "</version>");
    }

    @Test
    void theSelfTestOfTheLauncherPasses() throws IOException {
        assertThat(SelfTest.run()).isZero();
    }
}
