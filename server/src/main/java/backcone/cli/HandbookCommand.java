package backcone.cli;

import backcone.engine.Handbook;
import backcone.engine.answers.HandbookPages;
import java.io.PrintWriter;
import java.util.List;
import java.util.concurrent.Callable;
import org.jspecify.annotations.Nullable;
import picocli.CommandLine.Command;
import picocli.CommandLine.Model.CommandSpec;
import picocli.CommandLine.Parameters;
import picocli.CommandLine.Spec;

/** {@code backcone handbook}: what kinds, properties, methods and words exist. */
@Command(
        name = "handbook",
        mixinStandardHelpOptions = true,
        header = "Tells what can be written: kinds of block, properties, methods, choices, quantities, units.",
        footer = {
            "",
            "Examples:",
            "  backcone handbook                      what there is",
            "  backcone handbook bevel                the properties of a block",
            "  backcone handbook lewis_buckingham     a method as a calculation sheet",
            "  backcone handbook Tooth_form           the words of a choice",
            "  backcone handbook units"
        })
final class HandbookCommand implements Callable<Integer> {
    @Spec
    @SuppressWarnings("NullAway.Init")
    CommandSpec spec;

    @Parameters(
            arity = "0..1",
            paramLabel = "NAME",
            description = "A kind, property, method, choice, quantity or `units`.")
    @Nullable
    String name;

    @Override
    public Integer call() {
        PrintWriter out = spec.commandLine().getOut();
        HandbookPages pages = new HandbookPages(Handbook.standard().shapes(), Handbook::text);
        List<String> page = name == null ? pages.overview() : pages.page(name);
        if (page.isEmpty()) {
            String near = name == null ? null : backcone.engine.model.Suggest.nearest(name, pages.names());
            spec.commandLine()
                    .getErr()
                    .println("backcone: the handbook has nothing called `" + name + "`."
                            + (near == null ? "" : " Did you mean `" + near + "`?"));
            return 2;
        }
        page.forEach(out::println);
        return 0;
    }
}
