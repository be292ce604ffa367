package backcone.engine.parse;

import static org.assertj.core.api.Assertions.assertThat;

import backcone.engine.Handbook;
import backcone.engine.syntax.FileSyntax;
import backcone.engine.text.FileId;
import java.io.IOException;
import java.io.InputStream;
import java.nio.charset.StandardCharsets;
import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.FieldSource;
import org.junit.jupiter.params.provider.MethodSource;

class TreeCodecTest {

    @ParameterizedTest
    @FieldSource("backcone.engine.parse.Texts#NAMES")
    void aTreeComesBackAsItWas(String name) {
        FileSyntax tree = Parser.parse(Texts.id(name), Texts.read(name)).tree();
        assertThat(TreeCodec.read(TreeCodec.write(tree))).isEqualTo(tree);
    }

    @ParameterizedTest
    @FieldSource("backcone.engine.parse.Texts#NAMES")
    void soDoTreesWithHoles(String name) {
        String text = Texts.read(name);
        for (int end = 0; end < text.length(); end += 7) {
            FileSyntax tree = Texts.parse(text.substring(0, end)).tree();
            assertThat(TreeCodec.read(TreeCodec.write(tree))).isEqualTo(tree);
        }
    }

    @Test
    void bytesOfAnotherVersionAreNotRead() {
        byte[] bytes = TreeCodec.write(Texts.parse("a = 1\n").tree());
        bytes[3]++;
        assertThat(TreeCodec.read(bytes)).isNull();
        assertThat(TreeCodec.read(new byte[0])).isNull();
    }

    static List<String> handbook() {
        return Handbook.names();
    }

    @ParameterizedTest
    @MethodSource("handbook")
    void theBuiltTreeOfAHandbookTextIsThatOfAFreshParse(String name) throws IOException {
        FileId id = new FileId(FileId.HANDBOOK + name + ".method");
        String text = new String(resource(name + ".method"), StandardCharsets.UTF_8);
        assertThat(TreeCodec.read(resource(name + ".tree")))
                .isEqualTo(Parser.parse(id, text).tree());
    }

    private static byte[] resource(String name) throws IOException {
        try (InputStream in = Handbook.class.getResourceAsStream("handbook/" + name)) {
            assertThat(in).as(name).isNotNull();
            return in.readAllBytes();
        }
    }
}
