package backcone.engine;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.Set;
import org.junit.jupiter.api.Test;

/** A spec is read with the files of the methods it names, and no others. */
class HandbookPartsTest {
    @Test
    void aMethodBringsItsFileAndThoseThatItIncludes() {
        assertThat(files("iso_10300_b1"))
                .contains("blocks", "bevel-geometry", "iso-10300", "iso-strength")
                .doesNotContain("iso-6336", "agma-2003", "agma-2101", "lewis-buckingham");
        assertThat(files("lewis_buckingham")).contains("lewis-buckingham").doesNotContain("iso-strength");
    }

    @Test
    void aMethodThatNobodyKnowsBringsAllSinceItCouldBeMeantForAnother() {
        assertThat(files("iso_10300_b")).containsAll(Handbook.names());
    }

    @Test
    void withoutExamplesTheSameNamesAreThere() {
        assertThat(Handbook.standard().shapes().library().methods.keySet())
                .isEqualTo(Handbook.whole().shapes().library().methods.keySet());
        assertThat(Handbook.standard().shapes().library().tables.keySet())
                .isEqualTo(Handbook.whole().shapes().library().tables.keySet());
        assertThat(Handbook.standard().problems()).isEmpty();
    }

    private static Set<String> files(String method) {
        return Handbook.contents().knows(Set.of(method))
                ? Handbook.contents().filesFor(Set.of(method))
                : Set.copyOf(Handbook.names());
    }
}
