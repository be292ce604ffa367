package backcone.engine;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import backcone.engine.answers.State;
import backcone.engine.review.Comparison;
import backcone.engine.review.Comparison.DriveChange;
import backcone.engine.review.Comparison.Fate;
import backcone.engine.review.Comparison.Lowered;
import backcone.engine.review.Comparison.Move;
import backcone.engine.review.Comparison.Share;
import backcone.engine.review.Edit;
import backcone.engine.text.FileId;
import java.time.LocalDate;
import java.util.LinkedHashMap;
import java.util.Map;
import org.junit.jupiter.api.Test;

/** Two states of small drives; margins follow a rule of thumb that can be worked out by hand. */
class CompareTest {
    /** Teeth times face width over power: 20 * 20 mm over 2000 mm is 0.2. */
    private static final String HOUSE = """
            source own "own"
            method house for cylindrical "a rule of thumb" {
              edition 2020
              check grip "grip" : Ratio = pinion.z * b / (P_in / 1 kN * 1 s)     per own, derived
            }
            """;

    private static final String DRIVE = """
            use "house.method"
            drive d "A" {
              case rated { at = a; power = 2 kW }
              shaft a { speed = 600 rpm }
              shaft z
              cylindrical c {
                normal_module = 2 mm
                face_width    = 20 mm
                pinion on a { teeth = 20 }
                wheel on z { teeth = 40 }
              }
              rate c by house edition 2020 { grip >= 0.1 }
              require z.speed between 290 rpm and 310 rpm
            }
            """;

    private static BackconeEngine engine(Map<String, String> texts) {
        return BackconeEngine.create(
                f -> {
                    String t = texts.get(f.path());
                    return t == null ? new Loader.Loaded.Missing() : new Loader.Loaded.Text(t);
                },
                LocalDate.of(2026, 12, 1));
    }

    private static Comparison compare(String before, String after) {
        return compare(
                Map.of("d.drive", before, "house.method", HOUSE), Map.of("d.drive", after, "house.method", HOUSE));
    }

    private static Comparison compare(Map<String, String> before, Map<String, String> after) {
        Comparison c = engine(after).compare(engine(before), new FileId("d.drive"), new FileId("d.drive"));
        for (DriveChange d : c.drives()) {
            for (Move m : d.moved()) {
                double sum = m.shares().stream().mapToDouble(Share::share).sum();
                assertThat(sum).as(m.id()).isCloseTo(m.after() - m.before(), within(1e-9));
            }
        }
        return c;
    }

    private static DriveChange only(Comparison c) {
        assertThat(c.drives()).hasSize(1);
        return c.drives().get(0);
    }

    private static Move move(DriveChange d, String id) {
        return d.moved().stream().filter(m -> m.id().equals(id)).findFirst().orElseThrow();
    }

    private static Map<String, Double> shares(Comparison c, Move m) {
        Map<String, Double> out = new LinkedHashMap<>();
        for (Share s : m.shares()) {
            out.put(
                    String.join(
                            "+",
                            s.edits().stream().map(i -> c.edits().get(i).path()).toList()),
                    s.share());
        }
        return out;
    }

    @Test
    void nothingChangedNothingTold() {
        DriveChange d = only(compare(DRIVE, DRIVE));
        assertThat(d.fate()).isEqualTo(Fate.SAME);
        assertThat(d.edits()).isEmpty();
    }

    @Test
    void commentsAndLayoutAreNoEdits() {
        DriveChange d = only(compare(DRIVE, DRIVE.replace("teeth = 20 }", "teeth   =   20 }   # as drawn")));
        assertThat(d.fate()).isEqualTo(Fate.SAME);
    }

    /** grip = z b / P: 20 * 20 / 2000 = 0.2; margin over 0.1 is 1. Width alone 1.5 times, load alone 2 times. */
    @Test
    void theShareOfAnEditIsItsAverageOverAllOrders() {
        Comparison c = compare(DRIVE, DRIVE.replace("20 mm", "30 mm").replace("2 kW", "4 kW"));
        Move m = move(only(c), "c.house.grip");
        assertThat(m.before()).isCloseTo(1, within(1e-9));
        assertThat(m.after()).isCloseTo(0.5, within(1e-9));
        // width first: 1 -> 2, then load 2 -> 0.5; load first: 1 -> 0, then width 0 -> 0.5
        assertThat(shares(c, m).get("c.face_width")).isCloseTo(0.75, within(1e-9));
        assertThat(shares(c, m).get("rated.power")).isCloseTo(-1.25, within(1e-9));
    }

    @Test
    void aBarThatIsLoweredStandsApart() {
        Comparison c = compare(DRIVE, DRIVE.replace("grip >= 0.1", "grip >= 0.05"));
        DriveChange d = only(c);
        assertThat(d.lowered()).extracting(Lowered::what).containsExactly("requirement lowered");
        assertThat(move(d, "c.house.grip").shares()).extracting(Share::bar).containsExactly(true);
    }

    @Test
    void aRequirementThatIsGoneIsALoweredBar() {
        DriveChange d = only(compare(DRIVE, DRIVE.replace("grip >= 0.1", "")));
        assertThat(d.lowered()).extracting(Lowered::what).containsExactly("no longer required");
    }

    @Test
    void anotherUnitForTheSameValueIsSaidAndMovesNothingButDigits() {
        Comparison c = compare(DRIVE, DRIVE.replace("2 kW", "2.682 hp"));
        assertThat(c.edits()).extracting(Edit::kind).containsExactly(Edit.Kind.UNIT);
        assertThat(only(c).lowered()).isEmpty();
    }

    @Test
    void aRecordMovesNothing() {
        Comparison c = compare(
                DRIVE.replace(
                        "drive d \"A\" {",
                        "drive d \"A\" {\n  revision = \"A\"\n  approved = \"B. Ost\" on 2026-01-05"),
                DRIVE.replace(
                        "drive d \"A\" {",
                        "drive d \"A\" {\n  revision = \"B\"\n  approved = \"B. Ost\" on 2026-01-05"));
        assertThat(c.edits()).extracting(Edit::kind).containsExactly(Edit.Kind.RECORD);
        assertThat(only(c).moved()).isEmpty();
        assertThat(only(c).remarks()).isEmpty();
    }

    @Test
    void ratedFactsUnderAnUnchangedSignatureAreReported() {
        String signed = DRIVE.replace("drive d \"A\" {", "drive d \"A\" {\n  approved = \"B. Ost\" on 2026-01-05");
        assertThat(only(compare(signed, signed.replace("2 kW", "3 kW"))).remarks())
                .singleElement()
                .asString()
                .contains("approved");
    }

    @Test
    void editsThatContradictEachOtherApartAreMadeTogether() {
        String with = DRIVE.replace("normal_module = 2 mm", "normal_module = 2 mm\n    ratio = 2");
        Comparison c = compare(with, with.replace("ratio = 2", "ratio = 2.5").replace("teeth = 40", "teeth = 50"));
        DriveChange d = only(c);
        assertThat(d.together()).hasSize(1);
        assertThat(d.together().get(0).edits())
                .extracting(i -> c.edits().get(i).path())
                .containsExactlyInAnyOrder("c.ratio", "c.wheel.teeth");
        assertThat(move(d, "z.speed").shares()).hasSize(1);
    }

    @Test
    void aNameAndItsUseAreMadeTogether() {
        Comparison c = compare(
                DRIVE,
                DRIVE.replace("  shaft z\n", "  shaft z\n  let width = 30 mm\n")
                        .replace("face_width    = 20 mm", "face_width    = width"));
        assertThat(only(c).together()).hasSize(1);
        assertThat(move(only(c), "c.house.grip").after()).isCloseTo(2, within(1e-9));
    }

    @Test
    void aRenamedDriveIsFollowed() {
        DriveChange d =
                only(compare(DRIVE, DRIVE.replace("drive d ", "drive e ").replace("20 mm", "30 mm")));
        assertThat(d.formerName()).isEqualTo("d");
        assertThat(d.moved()).hasSize(1);
    }

    @Test
    void aDriveThatIsNewOrGoneIsSaid() {
        Comparison c = compare(DRIVE, "");
        assertThat(only(c).fate()).isEqualTo(Fate.REMOVED);
        assertThat(only(compare("", DRIVE)).fate()).isEqualTo(Fate.ADDED);
    }

    @Test
    void anEditOfAMethodFileIsAnEdit() {
        Comparison c = compare(
                Map.of("d.drive", DRIVE, "house.method", HOUSE),
                Map.of("d.drive", DRIVE, "house.method", HOUSE.replace("pinion.z * b", "2 * pinion.z * b")));
        Move m = move(only(c), "c.house.grip");
        assertThat(m.after()).isCloseTo(3, within(1e-9));
        assertThat(c.edits().get(m.shares().get(0).edits().get(0)).file().path())
                .isEqualTo("house.method");
    }

    @Test
    void anEditOfALibraryReachesTheDrivesThatUseIt() {
        String lib = "let width = 20 mm\nlet other = 3 mm\n";
        String drive = "use \"lib.drive\"\n" + DRIVE.replace("= 20 mm", "= width");
        Comparison c = compare(
                Map.of("d.drive", drive, "house.method", HOUSE, "lib.drive", lib),
                Map.of("d.drive", drive, "house.method", HOUSE, "lib.drive", "let width = 25 mm\nlet other = 4 mm\n"));
        Move m = move(only(c), "c.house.grip");
        assertThat(shares(c, m)).containsOnlyKeys("width");
        assertThat(only(c).edits()).hasSize(1); // `other` concerns nobody here
    }

    @Test
    void variantsAndRowsOfFamiliesAreDrivesOfTheirOwn() {
        String more = DRIVE + "variant v of d { c.face_width = 40 mm }\n"
                + "family f of d {\n  name | c.face_width\n  small | 15 mm\n  large | 45 mm\n}\n";
        Comparison c = compare(more, more.replace("45 mm", "50 mm").replace("2 kW", "3 kW"));
        assertThat(c.drives()).extracting(DriveChange::name).containsExactly("d", "v", "f.small", "f.large");
        DriveChange large = c.drives().get(3);
        assertThat(shares(c, move(large, "c.house.grip"))).hasSize(2);
        assertThat(shares(c, move(c.drives().get(1), "c.house.grip"))).containsOnlyKeys("rated.power");
    }

    @Test
    void aTextThatDidNotParseIsComparedAsFarAsItGoes() {
        Comparison c = compare(DRIVE.replace("require z.speed between 290 rpm and 310 rpm", "require ) ("), DRIVE);
        assertThat(c.remarks()).singleElement().asString().contains("error");
        assertThat(only(c).states()).extracting(s -> s.id()).contains("z.speed");
    }

    @Test
    void whatBecameShortIsAStateChange() {
        DriveChange d = only(compare(DRIVE, DRIVE.replace("2 kW", "8 kW")));
        assertThat(d.states()).anySatisfy(s -> {
            assertThat(s.before()).isEqualTo(State.CLEAR);
            assertThat(s.after()).isEqualTo(State.SHORT);
        });
        assertThat(d.facts()).extracting(f -> f.path()).contains("a.torque");
    }

    @Test
    void moreThanTwelveEditsAreGroupedByBlockOrSampled() {
        StringBuilder shafts = new StringBuilder();
        StringBuilder other = new StringBuilder();
        for (int i = 0; i < 14; i++) {
            shafts.append("  let w").append(i).append(" = ").append(i + 1).append(" mm\n");
            other.append("  let w").append(i).append(" = ").append(i + 2).append(" mm\n");
        }
        String sum = "w0 + w1 + w2 + w3 + w4 + w5 + w6 + w7 + w8 + w9 + w10 + w11 + w12 + w13";
        String before = DRIVE.replace("  shaft z\n", "  shaft z\n" + shafts).replace("= 20 mm", "= " + sum);
        String after = DRIVE.replace("  shaft z\n", "  shaft z\n" + other).replace("= 20 mm", "= " + sum);
        Comparison c = compare(before, after);
        Move m = move(only(c), "c.house.grip");
        assertThat(m.shares()).hasSize(14);
        // each adds 1 mm: 20 * 1 / 2000 / 0.1
        m.shares().forEach(s -> assertThat(s.share()).isCloseTo(0.1, within(1e-9)));
    }

    @Test
    void ledgersDoNotKnowTheDate() {
        String accepted = DRIVE.replace("grip >= 0.1", "grip >= 1")
                .replace(
                        "require z",
                        "accept c.house.grip >= 0.1 until 2027-06-30 by \"B. Ost\" because \"trial\"\n  require z");
        var drives = engine(Map.of("d.drive", accepted, "house.method", HOUSE))
                .analyse(new FileId("d.drive"))
                .reviews();
        assertThat(drives).hasSize(1);
        assertThat(drives.get(0).facts()).extracting(f -> f.path()).contains("c.ratio", "a.torque");
        assertThat(drives.get(0).equations()).hasSize(12);
    }

    @Test
    void theHashFollowsEquationsAndNotProse() {
        var one = engine(Map.of("d.drive", DRIVE, "house.method", HOUSE))
                .analyse(new FileId("d.drive"))
                .reviews();
        var prose = engine(Map.of("d.drive", DRIVE, "house.method", HOUSE.replace("\"grip\"", "\"how it grips\"")))
                .analyse(new FileId("d.drive"))
                .reviews();
        var other = engine(Map.of("d.drive", DRIVE, "house.method", HOUSE.replace("z * b", "z * b * 2")))
                .analyse(new FileId("d.drive"))
                .reviews();
        assertThat(prose.get(0).equations()).isEqualTo(one.get(0).equations());
        assertThat(other.get(0).equations()).isNotEqualTo(one.get(0).equations());
    }
}
