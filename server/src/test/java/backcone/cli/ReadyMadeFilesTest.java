package backcone.cli;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.condition.EnabledOnOs;
import org.junit.jupiter.api.condition.OS;
import org.junit.jupiter.api.io.TempDir;

/** The files of samples/ci and samples/review in a real repository, with this build as `backcone` on the path. */
@EnabledOnOs({OS.LINUX, OS.MAC})
class ReadyMadeFilesTest {
    private static final Path SAMPLES =
            Path.of("..", "samples").toAbsolutePath().normalize();
    private static final boolean UPDATE = Boolean.getBoolean("backcone.update");

    @TempDir
    Path dir;

    private record Ran(int status, String out) {}

    private Path repository() {
        return dir.resolve("repository");
    }

    private Ran run(Path folder, String... words) throws IOException, InterruptedException {
        String[] command = words.clone();
        if (command[0].equals("backcone")) {
            command[0] = dir.resolve("bin/backcone").toString();
        }
        ProcessBuilder b =
                new ProcessBuilder(command).directory(folder.toFile()).redirectErrorStream(true);
        Map<String, String> env = b.environment();
        env.put("PATH", dir.resolve("bin") + ":" + env.get("PATH"));
        env.put("GIT_CONFIG_GLOBAL", "/dev/null");
        env.put("GIT_CONFIG_NOSYSTEM", "1");
        Process p = b.start();
        p.getOutputStream().close();
        String text = new String(p.getInputStream().readAllBytes(), StandardCharsets.UTF_8);
        return new Ran(p.waitFor(), text);
    }

    private String git(String... words) throws IOException, InterruptedException {
        List<String> all = new ArrayList<>(
                List.of("git", "-c", "user.name=R. Falk", "-c", "user.email=falk@example.org", "--no-pager"));
        all.addAll(List.of(words));
        Ran r = run(repository(), all.toArray(String[]::new));
        assertThat(r.status()).as(r.out()).isZero();
        return r.out();
    }

    @BeforeEach
    void backconeOnThePath() throws IOException {
        Path bin = Files.createDirectories(dir.resolve("bin"));
        Path launcher = bin.resolve("backcone");
        Files.writeString(
                launcher,
                "#!/bin/sh\nexec '" + Path.of(System.getProperty("java.home"), "bin", "java") + "' -cp '"
                        + System.getProperty("java.class.path") + "' backcone.Backcone \"$@\"\n");
        assertThat(launcher.toFile().setExecutable(true)).isTrue();
    }

    private void build() throws IOException, InterruptedException {
        Ran r = run(
                dir,
                "sh",
                SAMPLES.resolve("review/make-repository.sh").toString(),
                repository().toString());
        assertThat(r.status()).as(r.out()).isZero();
    }

    @Test
    void theRepositoryIsTheSameWheneverItIsBuiltAndItsComparisonsAreAsRead() throws Exception {
        build();
        List<String> commits = git("log", "--reverse", "--format=%H").lines().toList();
        assertThat(commits).hasSizeGreaterThanOrEqualTo(12);
        Path golden = Path.of("src", "test", "resources", "backcone", "review");
        for (int i = 1; i < commits.size(); i++) {
            String said = run(
                            repository(),
                            "backcone",
                            "compare",
                            "--on",
                            "2026-12-01",
                            "--format",
                            "markdown",
                            commits.get(i - 1) + ".." + commits.get(i))
                    .out()
                    .replace(commits.get(i - 1), "before")
                    .replace(commits.get(i), "after");
            Path file = golden.resolve(String.format(java.util.Locale.ROOT, "%02d.md", i));
            if (UPDATE) {
                Files.createDirectories(golden);
                Files.writeString(file, said);
            }
            assertThat(said).as(git("log", "-1", "--format=%s", commits.get(i))).isEqualTo(Files.readString(file));
        }
    }

    @Test
    void hunkHeadersNameTheBlockAndLogsShowMargins() throws Exception {
        build();
        Files.copy(SAMPLES.resolve("ci/gitattributes"), repository().resolve(".gitattributes"));
        assertThat(run(repository(), "sh", SAMPLES.resolve("ci/gitconfig.sh").toString())
                        .status())
                .isZero();
        assertThat(git("diff", "HEAD~12..HEAD~11")).containsPattern("@@ .* @@ drive water_wheel");
        assertThat(git("diff", "-U1", "HEAD~12..HEAD~11")).containsPattern("@@ .* @@ +case rated");
        assertThat(run(repository(), "sh", SAMPLES.resolve("ci/gitconfig.sh").toString(), "--margins")
                        .status())
                .isZero();
        String log = git("log", "-p", "-1", "HEAD~11");
        assertThat(log)
                .containsPattern("-  up.lewis_buckingham.wear .*tight")
                .containsPattern("\\+  up.lewis_buckingham.wear .*short");
    }

    @Test
    void theHookRefusesAWrongTextAndAStaleLedger() throws Exception {
        Files.createDirectories(repository());
        git("init", "-q");
        Path hook = repository().resolve(".git/hooks/pre-commit");
        Files.createDirectories(hook.getParent());
        Files.copy(SAMPLES.resolve("ci/pre-commit"), hook);
        assertThat(hook.toFile().setExecutable(true)).isTrue();
        Files.writeString(repository().resolve("a.drive"), StartCommand.text("spur"));
        git("add", "-A");
        String[] commit = {
            "git", "-c", "user.name=R. Falk", "-c", "user.email=falk@example.org", "commit", "-q", "-m", "one"
        };
        Ran missing = run(repository(), commit);
        assertThat(missing.status()).isEqualTo(1);
        assertThat(missing.out()).contains("is missing");
        assertThat(run(repository(), "backcone", "ledger").status()).isZero();
        git("add", "-A");
        Ran good = run(repository(), commit);
        assertThat(good.status()).as(good.out()).isZero();
        Files.writeString(
                repository().resolve("a.drive"), StartCommand.text("spur").replaceFirst(" kW", " kg"));
        git("add", "-A");
        Ran wrong = run(repository(), commit);
        assertThat(wrong.status()).isEqualTo(1);
        assertThat(wrong.out()).contains("a drive text is wrong");
    }

    @Test
    void theWorkflowFilesCallCommandsThatExist() throws Exception {
        for (String f : List.of("github-actions.yml", "gitlab-ci.yml", "pre-commit", "gitconfig.sh")) {
            String text = Files.readString(SAMPLES.resolve("ci").resolve(f));
            var call = java.util.regex.Pattern.compile(
                            "\\bbackcone (check|compare|ledger)((?: --[a-z-]+(?: [a-z]+)?)*)")
                    .matcher(text);
            boolean any = false;
            while (call.find()) {
                any = true;
                String name = call.group(1);
                Command c = Main.commands().stream()
                        .filter(x -> x.usage().name().equals(name))
                        .findFirst()
                        .orElseThrow();
                for (String word : call.group(2).split(" ", -1)) {
                    if (word.startsWith("--")) {
                        assertThat(c.usage().option(word)).as(f + ": " + word).isNotNull();
                    }
                }
            }
            assertThat(any).as(f).isTrue();
        }
    }
}
