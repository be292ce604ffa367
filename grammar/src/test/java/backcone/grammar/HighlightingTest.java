package backcone.grammar;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Set;
import java.util.TreeSet;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import org.junit.jupiter.api.Test;

/** The keyword lists of editors are those of the language. */
class HighlightingTest {
    private static final Path EDITORS = Path.of("..", "editor-config");

    private static Set<String> words(String file, String pattern) throws IOException {
        Set<String> out = new TreeSet<>();
        Matcher m = Pattern.compile(pattern).matcher(Files.readString(EDITORS.resolve(file)));
        while (m.find()) {
            for (String w : m.group(1).split("[|\\s]+", -1)) {
                if (!w.isBlank()) {
                    out.add(w);
                }
            }
        }
        return out;
    }

    @Test
    void visualStudioCode() throws IOException {
        Set<String> found = words("vscode/syntaxes/backcone.tmLanguage.json", "\\(((?:[a-z]+\\|)+[a-z]+)\\)\\\\\\\\b");
        assertThat(found).containsAll(Words.all());
        assertThat(Words.all()).containsAll(found);
    }

    @Test
    void vim() throws IOException {
        assertThat(words("vim/syntax/backcone.vim", "(?m)^syntax keyword backcone\\w+ (.*)$"))
                .isEqualTo(Words.all());
    }

    @Test
    void kate() throws IOException {
        assertThat(words("kate/backcone.xml", "<item>([a-z]+)</item>")).isEqualTo(Words.all());
    }
}
