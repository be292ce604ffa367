package backcone.cli;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.io.PrintWriter;
import java.io.StringWriter;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.condition.EnabledOnOs;
import org.junit.jupiter.api.condition.OS;
import org.junit.jupiter.api.io.TempDir;
import tools.jackson.databind.JsonNode;
import tools.jackson.databind.ObjectMapper;

/** Compare, ledger, history and register on real repositories made by the test. */
@EnabledOnOs({OS.LINUX, OS.MAC})
class ReviewTest {
    private static final String PAIR = """
            material steel { class = V_alloy; treatment = quenched_tempered; surface_hardness = 265 HBW; static_stress = 245 MPa }
            drive %s "Test pair" {
              case rated { at = fast; power = 5 kW; service_factor = 1.25 }
              shaft fast { speed = 600 rpm }
              shaft slow
              cylindrical pair {
                normal_module  = 5 mm
                face_width     = 60 mm
                pressure_angle = 20 deg
                tooth_system   = full_depth_20
                tooth_making   = generated
                finish_class   = carefully_cut
                pinion on fast { teeth = 20; profile_shift = 0; material = steel }
                wheel on slow { teeth = 50; profile_shift = 0; material = steel }
              }
              rate pair by lewis_buckingham { bending >= 1.5; wear >= 0.5 }
            }
            """;

    @TempDir
    Path dir;

    private record Result(int status, String out, String err) {}

    private Result backcone(String... args) {
        StringWriter out = new StringWriter();
        StringWriter err = new StringWriter();
        String before = System.getProperty("user.dir");
        int status = Main.run(args, new PrintWriter(out), new PrintWriter(err));
        assertThat(System.getProperty("user.dir")).isEqualTo(before);
        assertThat(err.toString()).doesNotContain("Exception");
        return new Result(status, out.toString(), err.toString());
    }

    private String git(String... words) throws IOException, InterruptedException {
        List<String> all = new ArrayList<>(List.of(
                "git", "-c", "user.name=A. Tester", "-c", "user.email=a@example.org", "-c", "init.defaultBranch=main"));
        all.addAll(List.of(words));
        Process p = new ProcessBuilder(all)
                .directory(dir.toFile())
                .redirectErrorStream(true)
                .start();
        p.getOutputStream().close();
        String text = new String(p.getInputStream().readAllBytes(), StandardCharsets.UTF_8);
        assertThat(p.waitFor()).as(text).isZero();
        return text;
    }

    private void write(String name, String text) throws IOException {
        Path p = dir.resolve(name);
        Files.createDirectories(p.getParent());
        Files.writeString(p, text);
    }

    private void commit(String subject) throws IOException, InterruptedException {
        git("add", "-A");
        git("commit", "-q", "-m", subject);
    }

    @BeforeEach
    void repository() throws IOException, InterruptedException {
        git("init", "-q");
        write("a b.drive", PAIR.formatted("d"));
        commit("one");
    }

    private Compared compared(String old, String now) throws Exception {
        backcone.git.Git git = backcone.git.Git.at(dir);
        try (backcone.git.Git.Reader r = git.reader();
                backcone.git.Git.Reader s = git.reader()) {
            return Compared.of(
                    Snapshot.revision(git, old, r),
                    now.isEmpty() ? Snapshot.folder(dir, "now") : Snapshot.revision(git, now, s),
                    f -> true,
                    java.time.LocalDate.of(2026, 12, 1));
        }
    }

    @Test
    void revisionsAreComparedAndNothingInTheRepositoryChanges() throws Exception {
        write("a b.drive", PAIR.formatted("d").replace("60 mm", "70 mm"));
        commit("two");
        String index = git("ls-files", "--stage", "--debug");
        String refs = git("for-each-ref");
        Compared c = compared("HEAD~1", "HEAD");
        assertThat(c.specs).hasSize(1);
        assertThat(c.specs.get(0).drives().get(0).moved()).isNotEmpty();
        assertThat(git("ls-files", "--stage", "--debug")).isEqualTo(index);
        assertThat(git("for-each-ref")).isEqualTo(refs);
        assertThat(git("status", "--porcelain")).isEmpty();
    }

    @Test
    void theWorkTreeCanBeTheNewState() throws Exception {
        write("a b.drive", PAIR.formatted("d").replace("60 mm", "70 mm"));
        assertThat(compared("HEAD", "").specs.get(0).drives().get(0).moved()).isNotEmpty();
    }

    @Test
    void filesOfAnyNameAreFoundAndRenamesFollowed() throws Exception {
        write("ü \"quoted\"\n.drive", PAIR.formatted("e"));
        commit("odd name");
        git("mv", "ü \"quoted\"\n.drive", "plain.drive");
        write("plain.drive", PAIR.formatted("e").replace("60 mm", "65 mm"));
        commit("renamed");
        Compared c = compared("HEAD~1", "HEAD");
        assertThat(c.specs).hasSize(1);
        assertThat(String.valueOf(c.specs.get(0).before())).isEqualTo("ü \"quoted\"\n.drive");
        assertThat(c.specs.get(0).drives().get(0).moved()).isNotEmpty();
    }

    @Test
    void nothingOfTheRepositoryIsRun() throws Exception {
        Path ran = dir.resolve("ran");
        Path hook = dir.resolve(".git/hooks/post-index-change");
        Files.createDirectories(hook.getParent());
        Path script = dir.resolve(".git/evil");
        Files.writeString(script, "#!/bin/sh\ntouch '" + ran + "'\n");
        Files.writeString(hook, "#!/bin/sh\ntouch '" + ran + "'\n");
        assertThat(script.toFile().setExecutable(true)).isTrue();
        assertThat(hook.toFile().setExecutable(true)).isTrue();
        Files.writeString(
                dir.resolve(".git/config"),
                Files.readString(dir.resolve(".git/config"))
                        + "[core]\n\tpager = " + script + "\n\tfsmonitor = " + script + "\n[diff]\n\texternal = "
                        + script
                        + "\n[diff \"evil\"]\n\tcommand = " + script + "\n\ttextconv = " + script
                        + "\n[alias]\n\tlog = !" + script + "\n");
        Files.writeString(dir.resolve(".gitattributes"), "*.drive diff=evil\n");
        write("a b.drive", PAIR.formatted("d").replace("60 mm", "70 mm"));
        Files.deleteIfExists(ran);
        compared("HEAD", "");
        backcone.git.Git git = backcone.git.Git.at(dir);
        assertThat(git.log("a b.drive", 5)).hasSize(1);
        assertThat(backcone("history", dir.resolve("a b.drive").toString(), "pair.lewis_buckingham.wear")
                        .status())
                .isZero();
        assertThat(ran).doesNotExist();
    }

    @Test
    void unknownRevisionsAndMissingRepositoriesAreSaid(@TempDir Path elsewhere) throws Exception {
        backcone.git.Git git = backcone.git.Git.at(dir);
        for (String r : List.of("nowhere", "", "-x", "--output=x", "HEAD:a", "HEAD~99")) {
            org.assertj.core.api.Assertions.assertThatThrownBy(() -> git.commit(r))
                    .isInstanceOf(backcone.git.GitException.class);
        }
        org.assertj.core.api.Assertions.assertThatThrownBy(() -> backcone.git.Git.at(elsewhere))
                .isInstanceOf(backcone.git.GitException.class)
                .hasMessageContaining("no git repository");
    }

    @Test
    void brokenHugeAndBinaryFilesAreNoReasonToStop() throws Exception {
        Files.write(dir.resolve("bytes.drive"), new byte[] {0, 1, (byte) 0xff, (byte) 0xfe, 10});
        Files.write(dir.resolve("huge.drive"), new byte[17 << 20]);
        write("half.drive", "drive x { shaft a { speed = ");
        commit("odd files");
        write("half.drive", PAIR.formatted("x"));
        Files.delete(dir.resolve("bytes.drive"));
        commit("mended");
        Compared c = compared("HEAD~1", "HEAD");
        assertThat(c.specs).extracting(x -> String.valueOf(x.after())).contains("half.drive");
        assertThat(compared("HEAD~2", "HEAD~1").specs).isNotNull();
    }

    @Test
    void aSubmoduleIsNoText() throws Exception {
        String id = git("rev-parse", "HEAD").strip();
        git("update-index", "--add", "--cacheinfo", "160000," + id + ",sub.drive");
        git("commit", "-q", "-m", "a submodule");
        assertThat(compared("HEAD~1", "HEAD").specs).isNotNull();
    }

    @Test
    void ledgersAreWrittenCheckedAndStale() throws Exception {
        String spec = dir.resolve("a b.drive").toString();
        assertThat(backcone("ledger", "--check", spec).status()).isEqualTo(1);
        assertThat(backcone("ledger", spec).status()).isZero();
        Path ledger = dir.resolve("a b.margins");
        String text = Files.readString(ledger);
        assertThat(text).contains("drive d", "pair.lewis_buckingham.wear", "allowable");
        assertThat(backcone("ledger", "--check", spec).status()).isZero();
        write("a b.drive", PAIR.formatted("d").replace("60 mm", "61 mm"));
        Result stale = backcone("ledger", "--check", spec);
        assertThat(stale.status()).isEqualTo(1);
        assertThat(stale.out()).contains("is stale");
        assertThat(Files.readString(ledger)).isEqualTo(text);
        write("a b.drive", PAIR.formatted("d").replace("60 mm", "61"));
        assertThat(backcone("ledger", spec).status()).isEqualTo(2);
        assertThat(Files.readString(ledger)).isEqualTo(text);
        try (var files = Files.list(dir)) {
            assertThat(files.filter(f -> f.toString().endsWith(".part"))).isEmpty();
        }
    }

    @Test
    void theHistoryNamesTheCommitThatMovedItMost() throws Exception {
        for (int b : new int[] {61, 40, 42}) {
            write("a b.drive", PAIR.formatted("d").replace("60 mm", b + " mm"));
            commit("width " + b);
        }
        String spec = dir.resolve("a b.drive").toString();
        Result r = backcone("history", spec, "pair.lewis_buckingham.wear");
        assertThat(r.status()).as(r.err()).isZero();
        assertThat(r.out().lines()).hasSize(5);
        assertThat(r.out()).containsPattern("width 40 +← moved it most|width 40   ← moved it most");
        assertThat(backcone("history", "--format", "csv", spec, "pair.lewis_buckingham.wear")
                        .out()
                        .lines())
                .hasSize(5);
        String svg = backcone("history", "--format", "svg", spec, "pair.lewis_buckingham.wear")
                .out();
        assertThat(javax.xml.parsers.DocumentBuilderFactory.newInstance()
                        .newDocumentBuilder()
                        .parse(new java.io.ByteArrayInputStream(svg.getBytes(StandardCharsets.UTF_8)))
                        .getDocumentElement()
                        .getTagName())
                .isEqualTo("svg");
        Result near = backcone("history", spec, "pair.lewis_buckingham.waer");
        assertThat(near.status()).isEqualTo(2);
        assertThat(near.err()).contains("pair.lewis_buckingham.wear");
    }

    @Test
    void twoFilesAreComparedInEveryFormat() throws Exception {
        write("b.drive", PAIR.formatted("d").replace("60 mm", "50 mm").replace("wear >= 0.5", "wear >= 0.4"));
        String a = dir.resolve("a b.drive").toString();
        String b = dir.resolve("b.drive").toString();
        assertThat(backcone("compare", a, b).out()).contains("Lowered bars", "pair.face_width 60 mm → 50 mm");
        assertThat(backcone("compare", "--format", "markdown", a, b).out()).contains("| --- |", "### Lowered bars");
        JsonNode json = new ObjectMapper()
                .readTree(backcone("compare", "--format", "json", a, b).out());
        for (JsonNode move : json.at("/specs/0/drives/0/moved")) {
            double sum = 0;
            for (JsonNode s : move.get("shares")) {
                sum += s.get("share").asDouble();
            }
            assertThat(sum)
                    .isCloseTo(
                            move.get("after").asDouble() - move.get("before").asDouble(),
                            org.assertj.core.api.Assertions.within(1e-9));
        }
        assertThat(backcone("compare", "--fail-on", "weakened", a, b).status()).isEqualTo(1);
        assertThat(backcone("compare", "--fail-on", "worse", a, b).status()).isEqualTo(1);
        assertThat(backcone("compare", "--fail-on", "short", a, b).status()).isZero();
    }

    @Test
    void roundedSharesAddUpToTheRoundedMove() {
        java.util.Random random = new java.util.Random(1);
        for (int k = 0; k < 1000; k++) {
            int n = 1 + random.nextInt(8);
            double[] exact = random.doubles(n, -50, 50).toArray();
            double sum = java.util.Arrays.stream(exact).sum();
            long whole = Math.round(sum) + random.nextInt(3) - 1;
            long[] shown = CompareReport.roundedTo(exact, whole);
            assertThat(java.util.Arrays.stream(shown).sum()).isEqualTo(whole);
            for (int i = 0; i < n; i++) {
                assertThat(Math.abs(shown[i] - exact[i])).isLessThanOrEqualTo(2);
            }
        }
    }

    @Test
    void theRegisterListsDeviationsAndAssumptions() throws Exception {
        write(
                "c.drive",
                PAIR.formatted("f")
                        .replace("wear >= 0.5", "wear >= 50")
                        .replace("service_factor = 1.25", "service_factor = 1.25 assumed because \"no record\"")
                        .replace(
                                "  rate pair",
                                "  accept pair.lewis_buckingham.wear >= 0.1 until 2026-12-20 by \"B. Ost\" because \"trial\"\n  rate pair"));
        Result r = backcone(
                "register", "--on", "2026-12-01", dir.resolve("c.drive").toString());
        assertThat(r.out()).contains("2026-12-20", "ends in 19 days", "rated.service_factor", "no record");
        assertThat(new ObjectMapper()
                        .readTree(backcone("register", "--format", "json", dir.toString())
                                .out())
                        .at("/deviations"))
                .hasSize(1);
    }

    private static void valid(String schema, String json) {
        var errors = com.networknt.schema.SchemaRegistry.withDefaultDialect(
                        com.networknt.schema.SpecificationVersion.DRAFT_2020_12)
                .getSchema(schema)
                .validate(json, com.networknt.schema.InputFormat.JSON);
        assertThat(errors).isEmpty();
    }

    private static String resource(String path) throws IOException {
        try (var in = ReviewTest.class.getResourceAsStream(path)) {
            return new String(java.util.Objects.requireNonNull(in).readAllBytes(), StandardCharsets.UTF_8);
        }
    }

    @Test
    void answersInJsonFollowTheirSchemas() throws Exception {
        write("b.drive", PAIR.formatted("d").replace("60 mm", "50 mm").replace("wear >= 0.5", "wear >= 5"));
        write("bad.drive", "drive x { shaft a { speed = 1,5 rpm } }");
        String a = dir.resolve("a b.drive").toString();
        String b = dir.resolve("b.drive").toString();
        valid(
                resource("/backcone/schema/compare.schema.json"),
                backcone("compare", "--format", "json", a, b).out());
        valid(
                resource("/backcone/schema/register.schema.json"),
                backcone("register", "--format", "json", dir.toString()).out());
        String sarif = backcone("check", "--format", "sarif", dir.toString()).out();
        valid(resource("sarif-subset.schema.json"), sarif);
        JsonNode results = new ObjectMapper().readTree(sarif).at("/runs/0/results");
        assertThat(results.toString()).contains("BC5001", "codeFlows", "BC1007");
        assertThat(sarif)
                .isEqualTo(
                        backcone("check", "--format", "sarif", dir.toString()).out());
    }

    @Test
    void theJunitFormIsXmlWithAFailureForWhatIsShort() throws Exception {
        write("b.drive", PAIR.formatted("d").replace("wear >= 0.5", "wear >= 5"));
        String xml = backcone("check", "--format", "junit", dir.toString()).out();
        var doc = javax.xml.parsers.DocumentBuilderFactory.newInstance()
                .newDocumentBuilder()
                .parse(new java.io.ByteArrayInputStream(xml.getBytes(StandardCharsets.UTF_8)));
        assertThat(doc.getElementsByTagName("failure").getLength()).isEqualTo(1);
        assertThat(doc.getElementsByTagName("testcase").getLength()).isEqualTo(6);
    }

    @Test
    void fingerprintsStayWhenLinesAreAddedAbove() throws Exception {
        write("b.drive", PAIR.formatted("d").replace("wear >= 0.5", "wear >= 5"));
        String b = dir.resolve("b.drive").toString();
        JsonNode one = new ObjectMapper()
                .readTree(backcone("check", "--format", "sarif", b).out());
        write("b.drive", "# a note\n\n" + PAIR.formatted("d").replace("wear >= 0.5", "wear >= 5"));
        JsonNode two = new ObjectMapper()
                .readTree(backcone("check", "--format", "sarif", b).out());
        String at = "/runs/0/results/0/partialFingerprints";
        assertThat(two.at(at)).isEqualTo(one.at(at));
        assertThat(one.at(at).isMissingNode()).isFalse();
    }
}
