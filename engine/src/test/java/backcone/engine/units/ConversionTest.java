package backcone.engine.units;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.math.BigDecimal;
import java.math.MathContext;
import java.util.ArrayList;
import java.util.HashSet;
import java.util.List;
import java.util.Random;
import java.util.Set;
import javax.measure.MetricPrefix;
import javax.measure.quantity.Acceleration;
import javax.measure.quantity.Temperature;
import org.junit.jupiter.api.DynamicTest;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.TestFactory;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import si.uom.NonSI;
import si.uom.SI;
import systems.uom.common.USCustomary;
import tech.units.indriya.unit.Units;

/** Conversions against a library that shares no code with this one, and against definitions in print. */
class ConversionTest {
    private static Unit unit(String text) {
        return UnitsTest.unit(text);
    }

    // ---- against the library, through its objects: its texts are another matter

    /** One unit in ours as a multiple of another, and the same for the library. */
    private record Pair(String unit, String of, javax.measure.Unit<?> theirs, javax.measure.Unit<?> theirsOf) {}

    private static List<Pair> pairs() {
        javax.measure.Unit<?> metre = Units.METRE;
        javax.measure.Unit<?> second = Units.SECOND;
        javax.measure.Unit<?> newton = Units.NEWTON;
        javax.measure.Unit<?> pascal = Units.PASCAL;
        javax.measure.Unit<?> joule = Units.JOULE;
        javax.measure.Unit<?> watt = Units.WATT;
        javax.measure.Unit<?> kilogram = Units.KILOGRAM;
        javax.measure.Unit<?> gravity =
                Units.METRE_PER_SQUARE_SECOND.asType(Acceleration.class).multiply(9.80665);
        javax.measure.Unit<?> kgf = kilogram.multiply(gravity);
        javax.measure.Unit<?> lbf = USCustomary.POUND.multiply(gravity);
        javax.measure.Unit<?> psi = lbf.divide(USCustomary.INCH.pow(2));
        javax.measure.Unit<?> newtonMetre = newton.multiply(metre);
        javax.measure.Unit<?> viscosity = SI.SQUARE_METRE_PER_SECOND;
        List<Pair> p = new ArrayList<>();
        p.add(new Pair("mm", "m", MetricPrefix.MILLI(Units.METRE), metre));
        p.add(new Pair("um", "m", MetricPrefix.MICRO(Units.METRE), metre));
        p.add(new Pair("cm", "m", MetricPrefix.CENTI(Units.METRE), metre));
        p.add(new Pair("dm", "m", MetricPrefix.DECI(Units.METRE), metre));
        p.add(new Pair("km", "m", MetricPrefix.KILO(Units.METRE), metre));
        p.add(new Pair("in", "m", USCustomary.INCH, metre));
        p.add(new Pair("uin", "m", MetricPrefix.MICRO(USCustomary.INCH), metre));
        p.add(new Pair("ft", "m", USCustomary.FOOT, metre));
        p.add(new Pair("in^2", "m^2", USCustomary.INCH.pow(2), metre.pow(2)));
        p.add(new Pair("in^4", "m^4", USCustomary.INCH.pow(4), metre.pow(4)));
        p.add(new Pair("l", "m^3", Units.LITRE, metre.pow(3)));
        p.add(new Pair("gal", "m^3", USCustomary.GALLON_LIQUID, metre.pow(3)));
        p.add(new Pair("ms", "s", MetricPrefix.MILLI(Units.SECOND), second));
        p.add(new Pair("min", "s", Units.MINUTE, second));
        p.add(new Pair("h", "s", Units.HOUR, second));
        p.add(new Pair("d", "s", Units.DAY, second));
        p.add(new Pair("yr", "s", NonSI.YEAR_JULIEN, second));
        p.add(new Pair("deg", "rad", NonSI.DEGREE_ANGLE, Units.RADIAN));
        p.add(new Pair("arcmin", "rad", NonSI.MINUTE_ANGLE, Units.RADIAN));
        p.add(new Pair("arcsec", "rad", NonSI.SECOND_ANGLE, Units.RADIAN));
        p.add(new Pair("rev", "rad", USCustomary.REVOLUTION, Units.RADIAN));
        p.add(new Pair("rpm", "rad/s", USCustomary.REVOLUTION.divide(Units.MINUTE), SI.RADIAN_PER_SECOND));
        p.add(new Pair("Hz", "1/s", Units.HERTZ, second.inverse()));
        p.add(new Pair("1/min", "1/s", Units.MINUTE.inverse(), second.inverse()));
        p.add(new Pair("kN", "N", MetricPrefix.KILO(Units.NEWTON), newton));
        p.add(new Pair("MN", "N", MetricPrefix.MEGA(Units.NEWTON), newton));
        p.add(new Pair("kgf", "N", kgf, newton));
        p.add(new Pair("tf", "N", NonSI.TONNE.multiply(gravity), newton));
        p.add(new Pair("lbf", "N", lbf, newton));
        p.add(new Pair("kip", "N", lbf.multiply(1000), newton));
        p.add(new Pair("kg", "N*s^2/m", kilogram, newton.multiply(second.pow(2)).divide(metre)));
        p.add(new Pair("g", "kg", Units.GRAM, kilogram));
        p.add(new Pair("t", "kg", NonSI.TONNE, kilogram));
        p.add(new Pair("lb", "kg", USCustomary.POUND, kilogram));
        p.add(new Pair("oz", "kg", USCustomary.OUNCE, kilogram));
        p.add(new Pair("MPa", "Pa", MetricPrefix.MEGA(Units.PASCAL), pascal));
        p.add(new Pair("GPa", "Pa", MetricPrefix.GIGA(Units.PASCAL), pascal));
        p.add(new Pair(
                "N/mm^2", "Pa", newton.divide(MetricPrefix.MILLI(Units.METRE).pow(2)), pascal));
        p.add(new Pair("bar", "Pa", pascal.multiply(100_000), pascal));
        p.add(new Pair("psi", "Pa", psi, pascal));
        p.add(new Pair("ksi", "Pa", psi.multiply(1000), pascal));
        p.add(new Pair(
                "kgf/mm^2", "Pa", kgf.divide(MetricPrefix.MILLI(Units.METRE).pow(2)), pascal));
        p.add(new Pair("kJ", "J", MetricPrefix.KILO(Units.JOULE), joule));
        p.add(new Pair("Wh", "J", watt.multiply(Units.HOUR), joule));
        p.add(new Pair("kWh", "J", MetricPrefix.KILO(Units.WATT).multiply(Units.HOUR), joule));
        p.add(new Pair("Nm", "N*m", newtonMetre, newtonMetre));
        p.add(new Pair("N*mm", "N*m", newton.multiply(MetricPrefix.MILLI(Units.METRE)), newtonMetre));
        p.add(new Pair("lbf*in", "N*m", lbf.multiply(USCustomary.INCH), newtonMetre));
        p.add(new Pair("lbf*ft", "N*m", lbf.multiply(USCustomary.FOOT), newtonMetre));
        p.add(new Pair("kgf*m", "N*m", kgf.multiply(metre), newtonMetre));
        p.add(new Pair("kgf*cm", "N*m", kgf.multiply(MetricPrefix.CENTI(Units.METRE)), newtonMetre));
        p.add(new Pair("kW", "W", MetricPrefix.KILO(Units.WATT), watt));
        p.add(new Pair("W", "N*m/s", watt, newtonMetre.divide(second)));
        p.add(new Pair("hp", "W", USCustomary.FOOT.multiply(lbf).divide(second).multiply(550), watt));
        p.add(new Pair("PS", "W", kgf.multiply(metre).divide(second).multiply(75), watt));
        p.add(new Pair("ft/min", "m/s", USCustomary.FOOT.divide(Units.MINUTE), metre.divide(second)));
        p.add(new Pair("ft/s", "m/s", USCustomary.FOOT_PER_SECOND, metre.divide(second)));
        p.add(new Pair("km/h", "m/s", Units.KILOMETRE_PER_HOUR, metre.divide(second)));
        p.add(new Pair("cSt", "m^2/s", NonSI.STOKES.divide(100), viscosity));
        p.add(new Pair("St", "m^2/s", NonSI.STOKES, viscosity));
        p.add(new Pair("P", "Pa*s", NonSI.POISE, SI.PASCAL_SECOND));
        p.add(new Pair("cP", "Pa*s", NonSI.POISE.divide(100), SI.PASCAL_SECOND));
        p.add(new Pair("mPa*s", "Pa*s", MetricPrefix.MILLI(Units.PASCAL).multiply(second), SI.PASCAL_SECOND));
        p.add(new Pair("kg/dm^3", "kg/m^3", kilogram.divide(Units.LITRE), SI.KILOGRAM_PER_CUBIC_METRE));
        p.add(new Pair(
                "g/cm^3",
                "kg/m^3",
                Units.GRAM.divide(MetricPrefix.CENTI(Units.METRE).pow(3)),
                SI.KILOGRAM_PER_CUBIC_METRE));
        p.add(new Pair("1/in", "1/m", USCustomary.INCH.inverse(), metre.inverse()));
        p.add(new Pair(
                "N/(mm*um)",
                "Pa",
                newton.divide(MetricPrefix.MILLI(Units.METRE).multiply(MetricPrefix.MICRO(Units.METRE))),
                pascal));
        p.add(new Pair("kg*m^2", "N*m*s^2", kilogram.multiply(metre.pow(2)), newtonMetre.multiply(second.pow(2))));
        p.add(new Pair("µm", "m", MetricPrefix.MICRO(Units.METRE), metre));
        p.add(new Pair("\u03BCm", "m", MetricPrefix.MICRO(Units.METRE), metre));
        p.add(new Pair("µin", "m", MetricPrefix.MICRO(USCustomary.INCH), metre));
        p.add(new Pair("L", "m^3", Units.LITRE, metre.pow(3)));
        p.add(new Pair("ml", "m^3", MetricPrefix.MILLI(Units.LITRE), metre.pow(3)));
        p.add(new Pair("mL", "m^3", MetricPrefix.MILLI(Units.LITRE), metre.pow(3)));
        p.add(new Pair("°", "rad", NonSI.DEGREE_ANGLE, Units.RADIAN));
        p.add(new Pair("mrad", "rad", MetricPrefix.MILLI(Units.RADIAN), Units.RADIAN));
        p.add(new Pair("urad", "rad", MetricPrefix.MICRO(Units.RADIAN), Units.RADIAN));
        p.add(new Pair("turn", "rad", USCustomary.REVOLUTION, Units.RADIAN));
        p.add(new Pair("kHz", "1/s", MetricPrefix.KILO(Units.HERTZ), second.inverse()));
        p.add(new Pair("daN", "N", MetricPrefix.DECA(Units.NEWTON), newton));
        p.add(new Pair("kp", "N", kgf, newton));
        p.add(new Pair("mbar", "Pa", MetricPrefix.HECTO(Units.PASCAL), pascal));
        p.add(new Pair("kPa", "Pa", MetricPrefix.KILO(Units.PASCAL), pascal));
        p.add(new Pair("kNm", "N*m", MetricPrefix.KILO(Units.NEWTON).multiply(metre), newtonMetre));
        p.add(new Pair("Nmm", "N*m", newton.multiply(MetricPrefix.MILLI(Units.METRE)), newtonMetre));
        p.add(new Pair("MJ", "J", MetricPrefix.MEGA(Units.JOULE), joule));
        p.add(new Pair("MW", "W", MetricPrefix.MEGA(Units.WATT), watt));
        p.add(new Pair("%", "1", Units.PERCENT, tech.units.indriya.AbstractUnit.ONE));
        return p;
    }

    @TestFactory
    List<DynamicTest> everyUnitHasTheSizeTheLibraryGivesIt() {
        List<DynamicTest> tests = new ArrayList<>();
        for (Pair p : pairs()) {
            tests.add(DynamicTest.dynamicTest(p.unit + " in " + p.of, () -> compare(p)));
        }
        return tests;
    }

    /** Hardness and grades are no multiples of anything, and cycles are counted; all other words are compared. */
    @Test
    void noWordOfTheTableIsLeftOut() {
        Set<String> compared = new HashSet<>(List.of("K", "degC", "degF", "°C", "°F", "cycles"));
        for (Pair p : pairs()) {
            compared.add(p.unit);
            compared.add(p.of);
        }
        Set<String> scales = Set.of("HBW", "HB", "HV", "HRC", "HR15N", "ISO17485", "ISO1328", "AGMA_Q", "AGMA_A");
        UnitTable table = UnitTable.load();
        assertThat(table.words().stream()
                        .filter(w -> table.instead(w) == null)
                        .filter(w -> !w.equals("s") && !scales.contains(w))
                        .filter(w -> !compared.contains(w)))
                .isEmpty();
    }

    private static void compare(Pair p) throws javax.measure.IncommensurableException {
        Unit a = unit(p.unit);
        Unit b = unit(p.of);
        assertThat(a.dimension()).isSameAs(b.dimension());
        for (double v : new double[] {1, 0.1, 36, 1480, 7.85e-3}) {
            double theirs = p.theirs.getConverterToAny(p.theirsOf).convert(v);
            assertThat(b.fromBase(a.toBase(v))).isCloseTo(theirs, within(4e-16 * theirs));
            double back = p.theirsOf.getConverterToAny(p.theirs).convert(v);
            assertThat(a.fromBase(b.toBase(v))).isCloseTo(back, within(4e-16 * back));
        }
    }

    @Test
    void temperaturesAreThoseOfTheLibrary() {
        javax.measure.Unit<Temperature> kelvin = Units.KELVIN;
        for (double v : new double[] {-40, -17.5, 0, 20, 68, 90, 212, 451.3}) {
            assertThat(unit("degC").toBase(v))
                    .isCloseTo(Units.CELSIUS.getConverterTo(kelvin).convert(v), within(1e-12));
            assertThat(unit("degF").toBase(v))
                    .isCloseTo(USCustomary.FAHRENHEIT.getConverterTo(kelvin).convert(v), within(1e-12));
            assertThat(unit("°C").toBase(v)).isEqualTo(unit("degC").toBase(v));
            assertThat(unit("°F").toBase(v)).isEqualTo(unit("degF").toBase(v));
        }
    }

    // ---- against definitions in print

    /** NIST Special Publication 811 (2008), appendix B.8; factors it prints in full, or to the digits shown. */
    @ParameterizedTest
    @CsvSource({
        "in, m, 2.54e-2, 0",
        "ft, m, 3.048e-1, 0",
        "uin, m, 2.54e-8, 0",
        "lb, kg, 4.5359237e-1, 0",
        "oz, kg, 2.834952e-2, 2e-7",
        "lbf, N, 4.4482216152605, 0",
        "kip, N, 4.4482216152605e3, 0",
        "kgf, N, 9.80665, 0",
        "kp, N, 9.80665, 0",
        "lbf*in, N*m, 1.129848e-1, 5e-7",
        "lbf*ft, N*m, 1.355818, 3e-7",
        "kgf*m, N*m, 9.80665, 0",
        "psi, Pa, 6.894757e3, 1e-7",
        "ksi, Pa, 6.894757e6, 1e-7",
        "kgf/mm^2, Pa, 9.80665e6, 0",
        "kgf/cm^2, Pa, 9.80665e4, 0",
        "bar, Pa, 1e5, 0",
        "hp, W, 7.456999e2, 2e-7",
        "PS, W, 7.354988e2, 1e-7",
        "kWh, J, 3.6e6, 0",
        "ft/min, m/s, 5.08e-3, 0",
        "km/h, m/s, 2.777778e-1, 1e-7",
        "cSt, m^2/s, 1e-6, 0",
        "St, m^2/s, 1e-4, 0",
        "cP, Pa*s, 1e-3, 0",
        "deg, rad, 1.745329e-2, 2e-7",
        "arcmin, rad, 2.908882e-4, 1e-7",
        "arcsec, rad, 4.848137e-6, 1e-7",
        "rev, rad, 6.283185, 1e-7",
        "rpm, rad/s, 1.047198e-1, 5e-7",
        "gal, m^3, 3.785412e-3, 1e-7",
        "gal, l, 3.785411784, 0",
        "lb/in^3, kg/m^3, 2.767990e4, 2e-7",
        "lb*in^2, kg*m^2, 2.926397e-4, 2e-7",
        "lb*ft^2, kg*m^2, 4.214011e-2, 2e-7",
        "lbf/in, N/m, 1.751268e2, 3e-7",
        "yr, d, 365.25, 0"
    })
    void factorsAreThoseInPrint(String text, String of, double factor, double relative) {
        Unit a = unit(text);
        Unit b = unit(of);
        assertThat(a.dimension()).isSameAs(b.dimension());
        assertThat(b.fromBase(a.toBase(1))).isCloseTo(factor, within(Math.max(relative, 2.3e-16) * factor));
    }

    @ParameterizedTest
    @CsvSource({
        "36, mm, 36",
        "25, um, 0.025",
        "0.1, in, 2.54",
        "1, N*m, 1000",
        "7.85, kg/dm^3, 7.85e-9",
        "20, degC, 293.15",
        "0.1, degC, 273.25",
        "68, degF, 293.15",
        "-40, degF, 233.15",
        "-459.67, degF, 0",
        "-273.15, degC, 0",
        "5, %, 0.05",
        "180, deg, 3.141592653589793",
        "90, °, 1.5707963267948966",
        "30, rpm, 3.141592653589793",
        "1, rev, 6.283185307179586",
        "206, GPa, 206000",
        "37.3, kW, 37300000",
        "8, /in, 0.31496062992125984",
        "320, mm^2/s, 320",
        "1e6, cycles, 1e6"
    })
    void everydayValuesComeOutToTheLastDigit(double value, String text, double base) {
        assertThat(unit(text).toBase(value)).isEqualTo(base);
    }

    // ---- round trips and rounding

    @Test
    void typedNumbersComeBackFromEveryUnit() {
        Random random = new Random(1959);
        List<Unit> all = everyUnit();
        for (Unit u : all) {
            for (int i = 0; i < 2000; i++) {
                double typed = typed(random);
                assertThat(u.fromBase(u.toBase(typed))).as(u.text()).isEqualTo(typed);
            }
        }
        assertThat(all).hasSizeGreaterThan(120);
    }

    /** Up to nine digits with a power of ten as people type them; some negative. */
    private static double typed(Random random) {
        int digits = 1 + random.nextInt(9);
        long n = 1 + (long) (random.nextDouble() * Math.pow(10, digits));
        int places = random.nextInt(8);
        return BigDecimal.valueOf(random.nextInt(8) == 0 ? -n : n, places).doubleValue();
    }

    private static List<Unit> everyUnit() {
        UnitTable table = UnitTable.load();
        List<Unit> all = new ArrayList<>();
        for (String w : table.words()) {
            if (table.instead(w) == null) {
                all.add(unit(w));
            }
        }
        for (UnitTable.Named n : table.dimensions()) {
            for (String s : n.spellings()) {
                all.add(unit(s));
            }
        }
        for (String s : List.of("rpm^2", "deg/mm", "lbf/(in*uin)", "in^4", "hp/rpm", "psi^3/rev", "1/psi", "uin^5")) {
            all.add(unit(s));
        }
        return all;
    }

    /** Where the factors are exact, the result is the double next to the exact product of decimals. */
    @Test
    void resultsAreRoundedOnce() {
        Random random = new Random(811);
        int exactUnits = 0;
        for (Unit u : everyUnit()) {
            boolean exact = !u.isOffset() && u.numerator() == Math.rint(u.numerator()) && u.denominator() < 1e5;
            if (!exact) {
                continue;
            }
            exactUnits++;
            BigDecimal n = new BigDecimal(u.numerator());
            BigDecimal d = new BigDecimal(u.denominator());
            for (int i = 0; i < 500; i++) {
                double v = typed(random);
                BigDecimal once = BigDecimal.valueOf(v).multiply(n).divide(d, new MathContext(400));
                assertThat(u.toBase(v)).as(u.text() + " " + v).isEqualTo(once.doubleValue());
            }
        }
        assertThat(exactUnits).isGreaterThan(60);
    }

    /** A value typed in one unit equals the same value typed in another, to the last bit. */
    @ParameterizedTest
    @CsvSource({
        "0.1, in, 2.54, mm", "0.07, mm, 70, um", "0.0025, in, 2500, uin", "1.2, m, 120, cm",
                "7.85, kg/dm^3, 7850, kg/m^3",
        "0.3, kN, 300, N", "2.4, kW, 2400, W", "0.7, h, 42, min", "1.1, ksi, 1100, psi", "0.3, N/mm^2, 300, kPa",
        "0.35, deg, 21, arcmin", "12.7, kgf, 124.544455, N", "99.5, %, 0.995, 1", "1.7, N*m, 1700, N*mm",
                "4.4, cSt, 4.4e-6, m^2/s"
    })
    void theSameValueInTwoUnitsIsTheSameNumber(double a, String aUnit, double b, String bUnit) {
        assertThat(unit(aUnit).toBase(a)).isEqualTo(unit(bUnit).toBase(b));
    }

    @Test
    void oddValuesPassThrough() {
        for (Unit u : everyUnit()) {
            assertThat(u.toBase(Double.NaN)).isNaN();
            assertThat(u.fromBase(Double.NaN)).isNaN();
            assertThat(u.toBase(Double.POSITIVE_INFINITY)).isInfinite().isPositive();
            assertThat(u.fromBase(Double.NEGATIVE_INFINITY)).isInfinite().isNegative();
            if (!u.isOffset()) {
                assertThat(u.toBase(0)).isZero();
                assertThat(u.fromBase(0)).isZero();
                assertThat(u.toBase(1e-300)).isNotNaN();
                assertThat(u.fromBase(Double.MAX_VALUE)).isPositive();
            }
        }
        assertThat(unit("lbf").toBase(1e300)).isCloseTo(4.4482216152605e300, within(1e285));
    }
}
