package backcone.engine.units;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.HashMap;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

class UnitsTest {
    private static final Units UNITS = Units.standard();

    static Unit unit(String text) {
        if (UNITS.parse(text) instanceof Units.Parse.Ok ok) {
            return ok.unit();
        }
        throw new AssertionError(UNITS.parse(text));
    }

    private static Units.Parse.Bad bad(String text) {
        if (UNITS.parse(text) instanceof Units.Parse.Bad bad) {
            return bad;
        }
        throw new AssertionError("`" + text + "` was read as " + UNITS.parse(text));
    }

    // ---- reading

    @ParameterizedTest
    @ValueSource(
            strings = {"mm", "N", "s", "rad", "K", "MPa", "N/mm^2", "N*mm", "1", "cycles", "N*s/mm^2", "t", "rad/s"})
    void computingUnitsHaveTheScaleOne(String text) {
        Unit u = unit(text);
        assertThat(u.numerator()).isEqualTo(1);
        assertThat(u.denominator()).isEqualTo(1);
        assertThat(u.toBase(36)).isEqualTo(36);
        assertThat(u.isOffset()).isFalse();
        assertThat(u.text()).isEqualTo(text);
    }

    @Test
    void productsReadFromLeftToRight() {
        assertThat(unit("m/s/s").dimension()).isSameAs(unit("m/s^2").dimension());
        assertThat(unit("m/s*s").dimension()).isSameAs(unit("m").dimension());
        assertThat(unit("W/(m^2*K)").dimension()).isSameAs(unit("W/m^2/K").dimension());
        assertThat(unit("N/(mm*um)").toBase(20)).isEqualTo(20_000);
        assertThat(unit("((mm))^2").dimension()).isSameAs(unit("mm^2").dimension());
        assertThat(unit("mm^-1").dimension()).isSameAs(unit("1/mm").dimension());
        assertThat(unit("/in"))
                .usingRecursiveComparison()
                .ignoringFields("text")
                .isEqualTo(unit("1/in"));
        assertThat(unit("mm^0").dimension()).isSameAs(Dimension.NONE);
        assertThat(unit("rev/min").dimension()).isSameAs(unit("rpm").dimension());
    }

    @Test
    void angleIsADimension() {
        assertThat(unit("rpm").dimension()).isNotSameAs(unit("Hz").dimension());
        assertThat(unit("rpm").dimension()).isNotSameAs(unit("1/min").dimension());
        assertThat(unit("1/min").dimension()).isSameAs(unit("Hz").dimension());
    }

    @ParameterizedTest
    @CsvSource({
        "N*m,Torque", "Nm,Torque", "kNm,Torque", "N*mm,Torque", "Nmm,Torque", "lbf*in,Torque", "lbf*ft,Torque",
        "kgf*m,Torque", "kgf*cm,Torque", "kN*m,Torque", "J,Energy", "kJ,Energy", "kWh,Energy", "kW*h,Energy",
        "W*s,Energy", "K,TemperatureDifference", "degC,Temperature", "degF,Temperature", "cycles,Cycles"
    })
    void aTextBelongsToTheKindItIsUsedFor(String text, String kind) {
        assertThat(unit(text).kind()).isEqualTo(kind);
    }

    @ParameterizedTest
    @ValueSource(strings = {"ft*lbf", "mm", "N/mm", "W/(m^2*K)", "N*m/s", "N*m^1", "(N*m)", "m^2*N/m", "1", "%"})
    void otherTextsFitAnyKind(String text) {
        assertThat(unit(text).kind()).isNull();
    }

    @ParameterizedTest
    @ValueSource(
            strings = {
                "",
                " ",
                "/",
                "*",
                "^",
                "mm^",
                "mm^-",
                "mm^+2",
                "mm^1.5",
                "mm^(2)",
                "mm*",
                "*mm",
                "mm/",
                "mm//s",
                "//in",
                "(mm",
                "mm)",
                "()",
                "mm()",
                "mm(s)",
                "2",
                "2*mm",
                "5mm",
                "mm^31",
                "mm^-31",
                "mm^99999999999999999999",
                "km^30*km^30",
                "(mm^30)^30",
                "N mm",
                "m m",
                "xyz",
                "\u0000",
                "𝛑",
                "degC^2",
                "degC/s",
                "1/degC",
                "K*degF",
                "lb*in",
                "mPa"
            })
    void whatIsNoUnitIsSaid(String text) {
        Units.Parse.Bad b = bad(text);
        assertThat(b.message()).matches("(?s).*[.?]");
    }

    @Test
    void exponentsUpToThirtyAreReadExactly() {
        assertThat(unit("mm^30").numerator()).isEqualTo(1);
        assertThat(unit("km^30").toBase(1)).isEqualTo(1e180);
        assertThat(unit("um^-30").toBase(1)).isEqualTo(1e90);
        assertThat(unit("(mm^6)^10").dimension())
                .isSameAs(unit("mm").dimension().power(60, 1));
        assertThat(unit("rpm^30/rpm^29").toBase(30)).isEqualTo(Math.PI);
        String deep = "(".repeat(10) + "mm" + ")".repeat(10);
        assertThat(unit(deep).dimension()).isSameAs(unit("mm").dimension());
        assertThat(bad("(".repeat(45) + "mm" + ")".repeat(45)).nearest()).isNull();
        assertThat(bad("mm*".repeat(2_000_000)).message()).contains("too long");
    }

    // ---- suggestions

    @ParameterizedTest
    @CsvSource({
        "rmp,rpm",
        "Mpa,MPa",
        "mpa,MPa",
        "MPA,MPa",
        "mPa,MPa",
        "kn,kN",
        "KN,kN",
        "Kw,kW",
        "HP,hp",
        "RPM,rpm",
        "NM,Nm",
        "nm,Nm",
        "Psi,psi",
        "PSI,psi",
        "hrc,HRC",
        "hv,HV",
        "hbw,HBW",
        "MM,mm",
        "cst,cSt",
        "kWH,kWh",
        "agma_q,AGMA_Q",
        "iso1328,ISO1328",
        "lb*in,lbf*in",
        "in*lb,lbf*in",
        "lb*ft,lbf*ft",
        "lb-in,lbf*in",
        "in-lbs,lbf*in",
        "lbin,lbf*in",
        "ft-lb,lbf*ft",
        "kg*m,kgf*m",
        "kgm,kgf*m",
        "kg*cm,kgf*cm",
        "kg/cm^2,kgf/cm^2",
        "kg/cm2,kgf/cm^2",
        "kgf/mm2,kgf/mm^2",
        "lb/in^2,psi",
        "lbs/in2,psi",
        "N/mm2,N/mm^2",
        "N/MM2,N/mm^2",
        "Kn/mm2,kN/mm^2",
        "mm2,mm^2",
        "MM3,mm^3",
        "kNmm,kN*mm",
        "daNm,daN*m",
        "Nin,N*in",
        "lbfin,lbf*in",
        "kWs,kW*s",
        "N·m,N*m",
        "N⋅m,N*m",
        "N.m,N*m",
        "N-m,N*m",
        "N m,N*m",
        "N/mm²,N/mm^2",
        "mm⁻¹,mm^-1",
        "mm**2,mm^2",
        "rev./min,rpm",
        "U/min,rpm",
        "r/min,rpm",
        "sec,s",
        "rad/sec,rad/s",
        "m/Sec,m/s",
        "hrs,h",
        "hours,h",
        "years,yr",
        "inch,in",
        "micron,um",
        "degrees,deg",
        "percent,%",
        "C,degC",
        "lbs,lb",
        "BHN,HBW",
        "Rc,HRC",
        "DP,1/in",
        "W/(m^2*degC),W/(m^2*K)",
        "mPa*S,mPa*s",
        "fpm,ft/min",
        "mp/s,m/s",
        "Mpa*mm^2,MPa*mm^2",
        "rps/s,(rev/s)/s",
        "ms/ss,ms/s",
        "kPaa,kPa",
        "Gpa,GPa",
        "arcmins,arcmin"
    })
    void theNearestUnitIsOffered(String typed, String meant) {
        Units.Parse.Bad b = bad(typed);
        assertThat(b.nearest()).isEqualTo(meant);
        assertThat(b.message()).contains("`" + meant + "`").doesNotContain("..");
        unit(meant);
    }

    @ParameterizedTest
    @ValueSource(
            strings = {"HRB", "HRA", "HK", "ton", "tons", "xyz", "teeth", "AGMA", "ISO", "mil", "q", "Ohm", "degF*m"})
    void nothingIsOfferedWhereNothingCanBeGuessed(String typed) {
        assertThat(bad(typed).nearest()).isNull();
    }

    @Test
    void messagesSayWhatWasFound() {
        assertThat(bad("rmp").message()).isEqualTo("There is no unit `rmp`. Did you mean `rpm`?");
        assertThat(bad("kW/rmp").message()).isEqualTo("There is no unit `rmp`. Did you mean `kW/rpm`?");
        assertThat(bad("lb*in").message()).isEqualTo("`lb*in` is a mass times a length. Did you mean `lbf*in`?");
        assertThat(bad("5mm").message()).contains("no number").contains("`5mm`");
        assertThat(bad("degC/m").message()).contains("`K`");
        assertThat(bad("HRB").message()).contains("`HRC`");
    }

    @Test
    void aSwapCountsAsOneStepAndTheSameLettersAreNearer() {
        assertThat(Suggestions.distance("rmp", "rpm")).isLessThan(Suggestions.distance("rmp", "mm"));
        assertThat(Suggestions.distance("Mpa", "MPa")).isLessThan(Suggestions.distance("Mpa", "kPa"));
        assertThat(Suggestions.distance("kN", "kN")).isZero();
        assertThat(Suggestions.distance("ab", ""))
                .isEqualTo(Suggestions.distance("", "ab"))
                .isPositive();
    }

    // ---- words

    @ParameterizedTest
    @CsvSource(
            delimiter = ';',
            value = {
                "lbf*in; pound-force inch, torque",
                "kW*h; kilowatt hour, energy",
                "ft*lbf; foot pound-force, torque or energy",
                "rpm; revolutions per minute",
                "N/mm^2; newton per square millimetre, stress",
                "N/(mm*um); newton per millimetre micrometre, stiffness per width",
                "W/(m^2*K); watt per square metre kelvin, heat transfer coefficient",
                "kg/dm^3; kilogram per cubic decimetre, density",
                "mm^4; millimetre to the power 4, second moment of area",
                "1/in; per inch, one over a length",
                "/in; per inch, one over a length",
                "m*s^-2; metre per square second, acceleration",
                "m/(s/(1/s)); metre per second second, acceleration",
                "N^3; cubic newton"
            })
    void unitsAreDescribed(String text, String meaning) {
        assertThat(UNITS.describe(text)).isEqualTo(meaning);
    }

    @Test
    void whatIsUnknownHasNoDescription() {
        assertThat(UNITS.describe("rmp")).isEmpty();
        assertThat(UNITS.describe("")).isEmpty();
        assertThat(UNITS.describe("lb*in")).isEmpty();
    }

    @Test
    void dimensionsHaveEverydayNames() {
        Map<String, String> names = Map.of(
                "mm",
                "length",
                "N*m",
                "torque or energy",
                "rpm",
                "speed of rotation",
                "psi",
                "stress",
                "1",
                "pure number",
                "Hz",
                "frequency",
                "cSt",
                "kinematic viscosity",
                "HRC",
                "Rockwell C hardness",
                "lb",
                "mass",
                "in^2",
                "area");
        names.forEach(
                (unit, name) -> assertThat(UNITS.nameOf(unit(unit).dimension())).isEqualTo(name));
        assertThat(UNITS.nameOf(unit("N^2/mm").dimension())).isEqualTo("quantity of dimension force^2 / length");
    }

    @Test
    void commonSpellingsAreOfferedFirst() {
        assertThat(UNITS.unitsOf(unit("mm").dimension()))
                .startsWith("mm", "um", "in")
                .contains("µm");
        assertThat(UNITS.unitsOf(unit("psi").dimension()))
                .startsWith("MPa", "N/mm^2", "psi")
                .doesNotContain("mPa");
        assertThat(UNITS.unitsOf(unit("m/s").dimension())).startsWith("m/s", "ft/min");
        assertThat(UNITS.unitsOf(unit("J").dimension())).contains("N*m", "J", "lbf*in");
        assertThat(UNITS.unitsOf(unit("J").dimension(), "Energy"))
                .contains("J", "kWh")
                .doesNotContain("N*m", "Nm");
        assertThat(UNITS.unitsOf(unit("J").dimension(), "Torque"))
                .contains("N*m", "lbf*in")
                .doesNotContain("J");
        assertThat(UNITS.unitsOf(unit("N^7").dimension())).isEmpty();
    }

    // ---- the table

    @Test
    void everyLineOfTheTableIsInOrder() {
        UnitTable table = UnitTable.load();
        for (String w : table.words()) {
            Scale s = table.scale(w);
            assertThat(s).as(w).isNotNull();
            assertThat(UNITS.describe(w)).as(w).isNotEmpty();
            if (table.instead(w) == null) {
                assertThat(unit(w).text()).isEqualTo(w);
            }
        }
        assertThat(table.words()).containsAll(List.of("mm", "%", "°", "AGMA_Q", "in", "HB"));
        assertThat(UNITS.words()).isEqualTo(table.words());
    }

    @Test
    void everyOfferedSpellingIsOfItsDimension() {
        Map<Dimension, String> seen = new HashMap<>();
        Map<String, Dimension> names = new HashMap<>();
        for (UnitTable.Named n : UnitTable.load().dimensions()) {
            Dimension d = unit(n.spellings().get(0)).dimension();
            for (String s : n.spellings()) {
                assertThat(unit(s).dimension()).as(s).isSameAs(d);
            }
            boolean further = n.name().equals("spring rate") || n.name().equals("stiffness per width");
            assertThat(seen.putIfAbsent(d, n.name()) != null).as(n.name()).isEqualTo(further);
            assertThat(names.put(n.name(), d)).as(n.name()).isNull();
        }
    }

    @Test
    void aTableThatIsBrokenIsRefused() {
        for (String text :
                List.of("mm | base length", "[units]\nmm | base length | |x\nmm | 1 | |x", "[else]\na | b")) {
            assertThat(thrownBy(text)).as(text).isInstanceOf(IllegalStateException.class);
        }
    }

    private static @Nullable Throwable thrownBy(String table) {
        try {
            UnitTable.read(table);
            return null;
        } catch (IllegalStateException e) {
            return e;
        }
    }
}
