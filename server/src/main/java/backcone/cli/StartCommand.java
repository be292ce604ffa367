package backcone.cli;

import java.io.IOException;
import java.io.InputStream;
import java.io.PrintWriter;
import java.nio.charset.StandardCharsets;
import java.util.List;
import java.util.concurrent.Callable;
import org.jspecify.annotations.Nullable;
import picocli.CommandLine.Command;
import picocli.CommandLine.Model.CommandSpec;
import picocli.CommandLine.Parameters;
import picocli.CommandLine.Spec;

/** {@code backcone start}: a commented spec to begin with. */
@Command(
        name = "start",
        mixinStandardHelpOptions = true,
        header = "Prints a commented spec to begin with; every placeholder says what goes there and why.",
        footer = {
            "",
            "Kinds: straight-bevel, spur, two-stage, hoist",
            "",
            "Examples:",
            "  backcone start straight-bevel > head.drive",
            "  backcone check head.drive"
        })
final class StartCommand implements Callable<Integer> {
    @Spec
    @SuppressWarnings("NullAway.Init")
    CommandSpec spec;

    @Parameters(arity = "0..1", paramLabel = "KIND", description = "straight-bevel, spur, two-stage or hoist.")
    @Nullable
    String kind;

    static List<String> kinds() {
        return List.of("straight-bevel", "spur", "two-stage", "hoist");
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
    public Integer call() throws IOException {
        PrintWriter out = spec.commandLine().getOut();
        if (kind == null) {
            out.println("Kinds of starter: " + String.join(", ", kinds()) + ".");
            out.println("`backcone start straight-bevel > head.drive` writes one to a file.");
            return 0;
        }
        if (!kinds().contains(kind)) {
            String near = backcone.engine.model.Suggest.nearest(kind, kinds());
            spec.commandLine()
                    .getErr()
                    .println("backcone: there is no starter `" + kind + "`."
                            + (near == null
                                    ? " It is one of " + String.join(", ", kinds()) + "."
                                    : " Did you mean `" + near + "`?"));
            return Main.WRONG_USAGE;
        }
        out.print(text(kind));
        return 0;
    }
}
