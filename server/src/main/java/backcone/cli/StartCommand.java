package backcone.cli;

import backcone.engine.model.Suggest;
import java.io.IOException;
import java.io.InputStream;
import java.io.PrintWriter;
import java.nio.charset.StandardCharsets;
import java.util.List;

/** {@code backcone start}: a commented spec to begin with. */
final class StartCommand implements Command {
    static final List<String> KINDS = List.of("straight-bevel", "spur", "two-stage", "hoist");

    private static final Usage USAGE = new Usage(
            "start",
            "Prints a commented spec to begin with; every placeholder says what goes there and why.",
            List.of(new Usage.Operand(
                    "KIND",
                    "straight-bevel, spur, two-stage (bevel, then spur) or hoist (load spectrum)",
                    false,
                    false)),
            List.of(),
            List.of(
                    "The figures are an example that can be checked as it stands; lines marked with \"<-\" wait for yours."),
            List.of("backcone start straight-bevel > head.drive", "backcone check head.drive"));

    @Override
    public Usage usage() {
        return USAGE;
    }

    static String text(String kind) throws IOException {
        try (InputStream in = StartCommand.class.getResourceAsStream("/backcone/start/" + kind + ".drive")) {
            if (in == null) {
                throw new IOException("the starter `" + kind + "` is missing");
            }
            return new String(in.readAllBytes(), StandardCharsets.UTF_8);
        }
    }

    @Override
    public int run(Arguments arguments, PrintWriter out, PrintWriter err) throws WrongUsage, IOException {
        String kind = arguments.operand(0);
        if (kind == null) {
            USAGE.print(out);
            return Status.FINE;
        }
        if (!KINDS.contains(kind)) {
            String near = Suggest.nearest(kind, KINDS);
            throw new WrongUsage(
                    USAGE,
                    "there is no starter `" + kind + "`."
                            + (near == null
                                    ? " It is one of " + String.join(", ", KINDS) + "."
                                    : " Did you mean `" + near + "`?"));
        }
        out.print(text(kind));
        return Status.FINE;
    }
}
