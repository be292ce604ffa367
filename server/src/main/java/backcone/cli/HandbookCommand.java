package backcone.cli;

import backcone.engine.Handbook;
import backcone.engine.answers.HandbookPages;
import backcone.engine.diagnostics.Code;
import backcone.engine.model.Suggest;
import java.io.IOException;
import java.io.InputStream;
import java.io.PrintWriter;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;

/** {@code backcone handbook}: what kinds, properties, methods and words exist, and what a finding's code means. */
final class HandbookCommand implements Command {
    private static final int WIDTH = 100;

    private static final Usage USAGE = new Usage(
            "handbook",
            "Tells what can be written: kinds of block, properties, methods, choices, quantities, units; and what the code of"
                    + " a finding means.",
            List.of(new Usage.Operand(
                    "NAME",
                    "a block, property, method, choice, quantity, table, the word `units`, or a code such as BC3001; without it, a list",
                    false,
                    false)),
            List.of(),
            List.of(),
            List.of(
                    "backcone handbook                    what there is",
                    "backcone handbook bevel              the properties of a block",
                    "backcone handbook lewis_buckingham   a method as a calculation sheet",
                    "backcone handbook Tooth_form         the words of a choice",
                    "backcone handbook units              the units",
                    "backcone handbook BC3001             what a finding means, wrong and right"));

    @Override
    public Usage usage() {
        return USAGE;
    }

    @Override
    public int run(Arguments arguments, PrintWriter out, PrintWriter err) throws WrongUsage, IOException {
        String name = arguments.operand(0);
        String code = name == null ? null : codePage(name.toUpperCase(Locale.ROOT));
        if (code != null) {
            out.print(code);
            return Status.FINE;
        }
        HandbookPages pages = new HandbookPages(Handbook.whole().shapes(), Handbook::text);
        List<String> page = name == null ? pages.overview() : pages.page(name);
        if (name != null && page.isEmpty()) {
            List<String> names = new ArrayList<>(pages.names());
            for (Code c : Code.values()) {
                names.add(c.id());
            }
            throw new WrongUsage(
                    USAGE, "the handbook has nothing called `" + name + "`." + Suggest.sentence(name, names));
        }
        for (String line : page) {
            int text = 0;
            while (text < line.length() && line.charAt(text) == ' ') {
                text++;
            }
            Usage.wrap(line.substring(text), text, text + 4, WIDTH, out);
        }
        return Status.FINE;
    }

    private static @org.jspecify.annotations.Nullable String codePage(String id) throws IOException {
        for (Code c : Code.values()) {
            if (c.id().equals(id)) {
                try (InputStream in = Code.class.getResourceAsStream(id + ".md")) {
                    return in == null
                            ? id + ": " + c.title() + "\n"
                            : new String(in.readAllBytes(), StandardCharsets.UTF_8);
                }
            }
        }
        return null;
    }
}
