package backcone.engine.editing;

import static org.assertj.core.api.Assertions.assertThat;

import backcone.engine.Analysis;
import backcone.engine.BackconeEngine;
import backcone.engine.parse.Colours;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import java.util.List;
import java.util.stream.Stream;
import org.junit.jupiter.api.DynamicTest;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.TestFactory;

/** Every question at every word of every sample, and of texts cut in the middle. */
class EveryPlaceTest {

    @TestFactory
    Stream<DynamicTest> everyQuestionAtEveryWord() {
        return SamplesOnDisk.files().stream()
                .map(f -> DynamicTest.dynamicTest(f.path(), () -> all(f, SamplesOnDisk.text(f), 1)));
    }

    @TestFactory
    Stream<DynamicTest> andInTextsThatEndInTheMiddle() {
        return SamplesOnDisk.files().stream()
                .limit(6)
                .map(f -> DynamicTest.dynamicTest(f.path(), () -> {
                    String text = SamplesOnDisk.text(f);
                    for (int k = 1; k < 8; k++) {
                        all(f, text.substring(0, text.length() * k / 8), 9);
                    }
                }));
    }

    private static void all(FileId file, String text, int step) {
        BackconeEngine engine = SamplesOnDisk.engine();
        Analysis a = engine.analyse(file, text, null, true);
        Scene s = a.scene();
        List<Colours.Piece> pieces = Colours.of(text);
        for (int i = 0; i < pieces.size(); i += step) {
            Colours.Piece p = pieces.get(i);
            for (int at : new int[] {p.start(), p.end()}) {
                Hovers.Hover h = Hovers.at(s, at);
                if (h != null) {
                    inside(h.span(), text);
                    assertThat(h.markdown()).isNotBlank();
                }
                Completions.Offer o = Completions.at(s, at);
                inside(o.word(), text);
                Signatures.at(s, at);
                Occurrence x = s.occurrences().at(at);
                if (x != null && step > 1) {
                    s.occurrences().of(x.target()).forEach(y -> inside(y.span(), text));
                }
                List<Span> around = Outline.around(s, at);
                for (int k = 1; k < around.size(); k++) {
                    assertThat(around.get(k).start())
                            .isLessThanOrEqualTo(around.get(k - 1).start());
                    assertThat(around.get(k).end())
                            .isGreaterThanOrEqualTo(around.get(k - 1).end());
                }
                Calls.Item c = i % 5 == 0 ? Calls.at(s, at) : null;
                if (c != null) {
                    Calls.from(s, c.drive(), c.name());
                    Calls.into(s, c.drive(), c.name());
                }
            }
        }
        Outline.symbols(s);
        Outline.folds(s).forEach(f -> inside(f.span(), text));
        for (Hints.Hint h : Hints.between(s, 0, text.length(), true, true)) {
            assertThat(h.label().length()).isLessThanOrEqualTo(Labels.LONGEST);
            assertThat(h.offset()).isBetween(0, text.length());
            Hints.tooltip(s, h.about());
        }
    }

    private static void inside(Span s, String text) {
        assertThat(s.start()).isBetween(0, text.length());
        assertThat(s.end()).isBetween(s.start(), text.length());
    }

    @Test
    void everyKeywordHasItsExplanation() {
        assertThat(Keywords.all().keySet()).containsAll(Colours.keywords());
        assertThat(Colours.keywords()).containsAll(Keywords.all().keySet());
    }
}
