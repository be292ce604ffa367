package backcone.engine;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.Random;
import java.util.TreeMap;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import java.util.stream.Stream;

/** Texts of drives for properties that hold for any drive: the samples, the samples with other numbers, and made-up trains. */
final class GeneratedDrives {
    private static final Path SAMPLES = Path.of("..", "samples");
    private static final Pattern LOAD =
            Pattern.compile("(?m)^(\\s*(?:[\\w]+\\.)*(?:power|torque|peak_torque)\\s*=\\s*)([0-9.]+)");
    private static final Pattern SIZE = Pattern.compile(
            "(?m)^(\\s*(?:outer_module|normal_module|face_width|power|torque|speed)\\s*=\\s*)([0-9.]+)( +[a-zA-Z*/]+)");
    private static final Pattern TEETH = Pattern.compile("(?m)^(\\s*teeth\\s*=\\s*)([0-9]+)$");

    private GeneratedDrives() {}

    record Text(String path, String text) {}

    /** Every sample by its path, with the libraries that they use. */
    static Map<String, String> library() throws IOException {
        Map<String, String> out = new TreeMap<>();
        try (Stream<Path> all = Files.walk(SAMPLES)) {
            for (Path p : all.filter(f ->
                            f.toString().endsWith(".drive") && !f.toString().contains("broken"))
                    .toList()) {
                out.put(SAMPLES.relativize(p).toString().replace('\\', '/'), Files.readString(p));
            }
        }
        return out;
    }

    /** The samples as they are. */
    static List<Text> samples() throws IOException {
        List<Text> out = new ArrayList<>();
        library().forEach((p, t) -> {
            if (p.indexOf('/') < 0) {
                out.add(new Text(p, t));
            }
        });
        return out;
    }

    /** The samples, the samples with other sizes, loads and teeth, and trains of one to four stages. */
    static List<Text> all(long seed) throws IOException {
        Random random = new Random(seed);
        List<Text> out = samples();
        for (Text t : List.copyOf(out)) {
            for (int k = 0; k < 2; k++) {
                out.add(new Text(t.path(), otherSizes(t.text(), random)));
            }
        }
        for (int k = 0; k < 16; k++) {
            out.add(new Text("train.drive", train(random)));
        }
        return out;
    }

    /** The loads of every case times a factor. Rows of families state theirs in a table and keep them. */
    static String moreLoad(String text, double factor) {
        return LOAD.matcher(text)
                .replaceAll(m -> Matcher.quoteReplacement(m.group(1) + exact(Double.parseDouble(m.group(2)) * factor)));
    }

    private static String otherSizes(String text, Random random) {
        String sized = SIZE.matcher(text.replaceAll("(?m)^ *assert .*\n", "")).replaceAll(m -> {
            double v = Double.parseDouble(m.group(2)) * (0.85 + 0.3 * random.nextDouble());
            return Matcher.quoteReplacement(m.group(1) + String.format(Locale.ROOT, "%.4g", v) + m.group(3));
        });
        return TEETH.matcher(sized).replaceAll(m -> m.group(1) + (Integer.parseInt(m.group(2)) + random.nextInt(4)));
    }

    /** Straight bevel and spur stages one behind the other, by the classic method. */
    static String train(Random random) {
        StringBuilder b = new StringBuilder();
        int stages = 1 + random.nextInt(4);
        b.append("use \"library/through-hardened-steels.drive\"\n\n");
        b.append("drive train \"made up\" {\n");
        b.append("  tight_limit = ").append(3 + random.nextInt(20)).append(" %\n");
        b.append("  case rated {\n    at = s0\n    ");
        b.append(
                        random.nextBoolean()
                                ? "power = " + number(random, 0.5, 30) + " kW"
                                : "torque = " + number(random, 20, 400) + " N*m")
                .append("\n    basis = measured_load\n    service_factor = ")
                .append(number(random, 1, 1.6))
                .append("\n    required_life = ")
                .append(1000 + random.nextInt(20000))
                .append(" h\n  }\n");
        b.append("  shaft s0 {\n    speed = ").append(number(random, 50, 1500)).append(" rpm\n  }\n");
        for (int i = 0; i < stages; i++) {
            boolean bevel = random.nextInt(3) == 0;
            String m = String.valueOf(3 + random.nextInt(7));
            int width = (8 + random.nextInt(5)) * Integer.parseInt(m);
            b.append("  shaft s").append(i + 1).append("\n");
            b.append(bevel ? "  bevel p" : "  cylindrical p").append(i).append(" {\n");
            if (bevel) {
                b.append("    tooth_form = straight\n    outer_module = ")
                        .append(m)
                        .append(" mm\n");
                b.append("    proportions = traditional\n");
                width = Math.min(width, 6 * Integer.parseInt(m));
            } else {
                b.append("    normal_module = ").append(m).append(" mm\n");
            }
            b.append("    face_width = ").append(width).append(" mm\n");
            b.append("    pressure_angle = 20 deg\n    tooth_system = full_depth_20\n");
            b.append("    tooth_making = ")
                    .append(bevel ? "formed" : "generated")
                    .append("\n");
            b.append("    finish_class = carefully_cut\n");
            member(b, "pinion", i, 17 + random.nextInt(8), bevel, "steel_42CrMo4_265");
            member(b, "wheel", i + 1, 30 + random.nextInt(60), bevel, "steel_34CrMo4_225");
            b.append("  }\n");
            b.append("  rate p").append(i).append(" by lewis_buckingham under rated {\n");
            if (bevel) {
                b.append("    wear_form = full_face\n");
            }
            b.append("    bending >= ").append(number(random, 1, 2)).append("\n");
            b.append("    endurance_strength >= 1.25\n    wear >= 1.0\n  }\n");
        }
        b.append("  require s").append(stages).append(".speed between 1 rpm and 300 rpm\n");
        b.append("}\n");
        return b.toString();
    }

    private static void member(StringBuilder b, String name, int shaft, int teeth, boolean bevel, String material) {
        b.append("    ").append(name).append(" on s").append(shaft).append(" {\n      teeth = ");
        b.append(teeth).append("\n");
        if (!bevel) {
            b.append("      profile_shift = 0\n");
        }
        b.append("      material = ").append(material).append("\n    }\n");
    }

    private static String number(Random random, double from, double to) {
        return String.format(Locale.ROOT, "%.3f", from + (to - from) * random.nextDouble());
    }

    private static String exact(double v) {
        return backcone.engine.units.Numbers.exact(v);
    }
}
