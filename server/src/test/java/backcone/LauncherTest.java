package backcone;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.File;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.attribute.FileTime;
import java.nio.file.attribute.PosixFilePermissions;
import java.time.Instant;
import java.util.ArrayList;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import java.util.concurrent.TimeUnit;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.condition.EnabledOnOs;
import org.junit.jupiter.api.condition.OS;
import org.junit.jupiter.api.io.CleanupMode;
import org.junit.jupiter.api.io.TempDir;

/** The launcher script in a folder of its own, with scripts that stand in for Java and Maven and say how they were called. */
@EnabledOnOs({OS.LINUX, OS.MAC})
class LauncherTest {
    private static final String JAVA = """
            #!/bin/sh
            for a in "$@"; do
                case $a in
                    -version) echo 'openjdk version "VERSION"' >&2; exit 0 ;;
                    -XX:ArchiveClassesAtExit=*) echo archive >"${a#*=}"; exit 0 ;;
                    fail-with-2) exit 2 ;;
                esac
            done
            echo "ran: $*"
            """;

    private static final String MAVEN = """
            #!/bin/sh
            echo "$*" >>maven-calls
            sleep DELAY
            [ -f broken ] && { echo "the compiler's own words"; exit 1; }
            mkdir -p server/target && echo jar >server/target/backcone.jar
            """;

    // the launcher may still write its class archive when a command has ended, so the folder is left to the system
    @TempDir(cleanup = CleanupMode.NEVER)
    @SuppressWarnings("NullAway.Init")
    Path dir;

    @SuppressWarnings("NullAway.Init")
    private Path home;

    @SuppressWarnings("NullAway.Init")
    private Path bin;

    private final Map<String, String> environment = new HashMap<>();

    private record Ran(int status, String out, String err) {}

    @BeforeEach
    void install() throws IOException {
        home = Files.createDirectories(dir.resolve("a folder with blanks"));
        Files.copy(Path.of("../backcone"), home.resolve("backcone"));
        executable(home.resolve("backcone"));
        for (String f : List.of(
                "pom.xml",
                "grammar/pom.xml",
                "grammar/src/main/G.g4",
                "engine/pom.xml",
                "engine/src/main/E.java",
                "server/pom.xml",
                "server/src/main/S.java")) {
            Path p = home.resolve(f);
            Files.createDirectories(p.getParent());
            Files.writeString(p, "x");
        }
        bin = Files.createDirectories(dir.resolve("bin"));
        script("java", JAVA.replace("VERSION", "17.0.1"));
        script("mvn", MAVEN.replace("DELAY", "0"));
        for (String tool : List.of(
                "dirname", "ls", "readlink", "find", "head", "cat", "cksum", "mkdir", "rm", "rmdir", "mv", "sleep")) {
            Path found = tool(tool);
            Files.createSymbolicLink(bin.resolve(tool), found);
        }
        environment.put("PATH", bin.toString());
        environment.put("XDG_CACHE_HOME", dir.resolve("cache").toString());
    }

    private static Path tool(String name) throws IOException {
        for (String folder : List.of("/usr/bin", "/bin")) {
            Path p = Path.of(folder, name);
            if (Files.exists(p)) {
                return p;
            }
        }
        throw new IOException("there is no " + name + " here");
    }

    private void script(String name, String text) throws IOException {
        Path p = bin.resolve(name);
        Files.writeString(p, text);
        executable(p);
    }

    private static void executable(Path p) throws IOException {
        Files.setPosixFilePermissions(p, PosixFilePermissions.fromString("rwxr-xr-x"));
    }

    private Process start(Path launcher, String... words) throws IOException {
        List<String> line = new ArrayList<>(List.of("/bin/sh", launcher.toString()));
        line.addAll(List.of(words));
        ProcessBuilder b = new ProcessBuilder(line).directory(new File("/"));
        b.environment().clear();
        b.environment().putAll(environment);
        return b.start();
    }

    private static Ran end(Process p) throws IOException, InterruptedException {
        p.getOutputStream().close();
        String out = new String(p.getInputStream().readAllBytes(), StandardCharsets.UTF_8);
        String err = new String(p.getErrorStream().readAllBytes(), StandardCharsets.UTF_8);
        assertThat(p.waitFor(60, TimeUnit.SECONDS)).isTrue();
        return new Ran(p.exitValue(), out, err);
    }

    private Ran run(String... words) throws IOException, InterruptedException {
        return end(start(home.resolve("backcone"), words));
    }

    private List<String> builds() throws IOException {
        Path calls = home.resolve("maven-calls");
        return Files.exists(calls) ? Files.readAllLines(calls) : List.of();
    }

    private void touch(String file, int secondsFromNow) throws IOException {
        Files.setLastModifiedTime(
                home.resolve(file), FileTime.from(Instant.now().plusSeconds(secondsFromNow)));
    }

    @Test
    void buildsOnFirstUseAndAgainOnlyWhenSourcesAreNewer() throws IOException, InterruptedException {
        Ran first = run("check", "a spec.drive");
        assertThat(first.status()).as(first.err()).isZero();
        assertThat(first.out()).contains("backcone.jar check a spec.drive");
        assertThat(first.err()).isEmpty();
        assertThat(builds()).containsExactly("-B -q -Dquick -pl server -am package");
        run("check");
        assertThat(builds()).hasSize(1);
        touch("engine/src/main/E.java", 2);
        run("check");
        assertThat(builds()).hasSize(2);
        touch("engine/src/main/E.java", -60);
        touch("grammar/src/main", 4); // as after a file in it was removed
        run("check");
        assertThat(builds()).hasSize(3);
    }

    @Test
    void aFailedBuildIsShownInFullAndNothingRuns() throws IOException, InterruptedException {
        Files.writeString(home.resolve("broken"), "");
        Ran r = run("check");
        assertThat(r.status()).isEqualTo(70);
        assertThat(r.err()).contains("the compiler's own words", "the build failed");
        assertThat(r.out()).isEmpty();
        Files.delete(home.resolve("broken"));
        assertThat(run("check").status()).isZero();
    }

    @Test
    void twoAtOnceBuildOnce() throws IOException, InterruptedException {
        script("mvn", MAVEN.replace("DELAY", "1"));
        Process one = start(home.resolve("backcone"), "check");
        Process other = start(home.resolve("backcone"), "check");
        assertThat(end(one).status()).isZero();
        assertThat(end(other).status()).isZero();
        assertThat(builds()).hasSize(1);
        assertThat(home.resolve("server/target/.building")).doesNotExist();
    }

    @Test
    void aLockThatAKilledBuildLeftIsNoObstacle() throws IOException, InterruptedException {
        Path lock = Files.createDirectories(home.resolve("server/target/.building"));
        Process gone = new ProcessBuilder("/bin/sh", "-c", "exit 0").start();
        gone.waitFor();
        Files.writeString(lock.resolve("pid"), gone.pid() + "\n");
        assertThat(run("check").status()).isZero();
    }

    @Test
    void theArchiveIsMadeBehindTheFirstRunAndUsedFromThenOn() throws IOException, InterruptedException {
        assertThat(run("check").out()).doesNotContain("SharedArchiveFile");
        Path cache = dir.resolve("cache/backcone");
        long patience = System.nanoTime() + TimeUnit.SECONDS.toNanos(20);
        while (archives(cache) == 0 && System.nanoTime() < patience) {
            Thread.sleep(50);
        }
        assertThat(archives(cache)).isEqualTo(1);
        assertThat(run("check").out()).contains("-XX:SharedArchiveFile=" + cache, "-XX:TieredStopAtLevel=1");
        assertThat(run("serve").out()).contains("SharedArchiveFile").doesNotContain("TieredStopAtLevel");
    }

    private static int archives(Path cache) throws IOException {
        if (!Files.isDirectory(cache)) {
            return 0;
        }
        try (var all = Files.list(cache)) {
            return (int) all.filter(p -> p.toString().endsWith(".jsa")).count();
        }
    }

    @Test
    void itRunsWithoutACache() throws IOException, InterruptedException {
        environment.put("XDG_CACHE_HOME", "/dev/null/nowhere");
        Ran r = run("check");
        assertThat(r.status()).isZero();
        assertThat(r.err()).isEmpty();
        environment.remove("XDG_CACHE_HOME");
        assertThat(run("check").err()).isEmpty();
    }

    @Test
    void anOddJavaIsNamedWithWhatToDo() throws IOException, InterruptedException {
        environment.put("JAVA_HOME", "/nowhere/jdk");
        Ran odd = run("check");
        assertThat(odd.status()).isEqualTo(70);
        assertThat(odd.err()).contains("JAVA_HOME is /nowhere/jdk", "JDK 17 or newer");
        environment.remove("JAVA_HOME");
        for (String old : List.of("1.8.0_402", "11.0.22")) {
            script("java", JAVA.replace("VERSION", old));
            Ran r = run("check");
            assertThat(r.status()).isEqualTo(70);
            assertThat(r.err()).contains("17 or newer is needed").doesNotContain("version 1 ");
        }
        for (String fit : List.of("17", "21.0.2", "25-ea")) {
            script("java", JAVA.replace("VERSION", fit));
            assertThat(run("check").status()).as(fit).isZero();
        }
        Files.delete(bin.resolve("java"));
        assertThat(run("check").err()).contains("no Java found");
    }

    @Test
    void aMissingMavenIsNamedWhereItIsNeeded() throws IOException, InterruptedException {
        run("check");
        Files.delete(bin.resolve("mvn"));
        assertThat(run("check").status()).isZero();
        touch("pom.xml", 2);
        Ran r = run("check");
        assertThat(r.status()).isEqualTo(70);
        assertThat(r.err()).contains("Maven 3.8.7");
    }

    @Test
    void aLinkFromElsewhereFindsItsFolder() throws IOException, InterruptedException {
        Path absolute = dir.resolve("absolute link");
        Files.createSymbolicLink(absolute, home.resolve("backcone"));
        Path relative = bin.resolve("bc");
        Files.createSymbolicLink(relative, Path.of("..", "absolute link"));
        assertThat(end(start(absolute, "check")).out()).contains(home + "/server/target/backcone.jar check");
        assertThat(end(start(relative, "check")).out()).contains(home + "/server/target/backcone.jar check");
    }

    @Test
    void theExitStatusIsThatOfTheCommand() throws IOException, InterruptedException {
        assertThat(run("fail-with-2").status()).isEqualTo(2);
    }
}
