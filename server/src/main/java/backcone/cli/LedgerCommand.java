package backcone.cli;

import backcone.engine.Analysis;
import java.io.IOException;
import java.io.PrintWriter;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.StandardCopyOption;
import java.time.LocalDate;
import java.util.List;
import org.jspecify.annotations.Nullable;

/** {@code backcone ledger}: writes or checks {@code NAME.margins} beside each spec. */
final class LedgerCommand implements Command {
    private static final Usage USAGE = new Usage(
            "ledger",
            "Writes NAME.margins beside each spec: every margin as text, to be committed with the spec.",
            List.of(new Usage.Operand(
                    "PATH",
                    "specs, or folders with every .drive below them; this folder if none is named",
                    false,
                    true)),
            List.of(
                    Usage.Option.flag(
                            "--check", "write nothing; say which ledgers are stale or missing (exit status 1)"),
                    Usage.Option.flag("--print", "print the ledgers instead of writing them"),
                    Usage.Option.flag("--textconv", "print a spec with its margins behind it, as git asks for it")),
            List.of(
                    "A ledger holds no date: an accepted shortfall stands in it as short, accepted until its day. Numbers are"
                            + " rounded, so that it changes only when something moved.",
                    "Exit status: 0 all ledgers are as they should be; 1 with --check, some is stale or missing; 2 a text is"
                            + " wrong, and its ledger is left alone; 64 wrong usage."),
            List.of(
                    "backcone ledger                    write the ledgers below this folder",
                    "backcone ledger --check            in CI: fail when one is stale",
                    "backcone ledger --print a.drive    look at one"));

    /** No acceptance has ended on this day. */
    static final LocalDate NO_DATE = LocalDate.of(1, 1, 1);

    @Override
    public Usage usage() {
        return USAGE;
    }

    @Override
    public int run(Arguments arguments, PrintWriter out, PrintWriter err) throws IOException, InterruptedException {
        if (arguments.has("--textconv")) {
            for (String f : arguments.operands()) {
                TextConv.print(f, out);
            }
            return Status.FINE;
        }
        FileSet set = FileSet.of(arguments.operands(), false);
        for (String u : set.unreachable()) {
            err.println("backcone: " + u + ".");
        }
        if (set.files().isEmpty()) {
            return Status.WRONG_TEXT;
        }
        boolean check = arguments.has("--check");
        boolean print = arguments.has("--print");
        int[] count = new int[4]; // as they should be, written, stale, missing
        int status = set.unreachable().isEmpty() ? Status.FINE : Status.WRONG_TEXT;
        EngineFactory engine = new EngineFactory(FileSet.root(set.files()), NO_DATE);
        try (Ahead<Path, Done> ahead = new Ahead<>(set.files(), f -> Done.of(engine, f))) {
            while (ahead.hasNext()) {
                Done d = ahead.next();
                Path file = d.file;
                String text = d.text;
                if (!d.said.isEmpty()) {
                    err.print(d.said);
                }
                if (text == null) {
                    status = Status.WRONG_TEXT;
                    continue;
                }
                if (text.isEmpty()) {
                    continue; // a library: no drive in it
                }
                if (print) {
                    out.print(text);
                    continue;
                }
                Path ledger = ledger(file);
                String now = Files.isRegularFile(ledger) ? Files.readString(ledger, StandardCharsets.UTF_8) : null;
                if (text.equals(now == null ? null : now.replace("\r\n", "\n"))) {
                    count[0]++;
                } else if (check) {
                    count[now == null ? 3 : 2]++;
                    out.println(FileSet.shown(ledger) + (now == null ? " is missing" : " is stale"));
                } else {
                    write(ledger, text);
                    count[1]++;
                    out.println(FileSet.shown(ledger) + (now == null ? " is new" : " is renewed"));
                }
            }
        }
        if (!print) {
            out.println(
                    check
                            ? count[0] + " as they should be, " + count[2] + " stale, " + count[3] + " missing"
                                    + (count[2] + count[3] > 0 ? "; `backcone ledger` renews them" : "")
                            : count[1] + " written, " + count[0] + " as they should be");
        }
        return Math.max(status, check && count[2] + count[3] > 0 ? Status.NOT_MET : Status.FINE);
    }

    /** A spec with its ledger's text; {@code said} is what there is to say of a wrong one. */
    private record Done(Path file, @Nullable String text, String said) {
        static Done of(EngineFactory engine, Path file) {
            java.io.StringWriter said = new java.io.StringWriter();
            String text = LedgerCommand.text(engine, file, new PrintWriter(said, true));
            engine.forget(file);
            return new Done(file, text, said.toString());
        }
    }

    /** The ledger's text; empty for a library, null where the spec is wrong and the reason is said. */
    static @Nullable String text(EngineFactory engine, Path file, PrintWriter err) {
        Checked c = Checked.of(engine, file);
        Analysis a = c.analysis();
        if (a == null || c.status() >= Status.WRONG_TEXT) {
            err.println("backcone: `" + c.shown() + "` has errors, so its ledger is left as it is; `backcone check "
                    + c.shown() + "` tells them.");
            return null;
        }
        return a.drives().isEmpty() ? "" : Ledger.of(String.valueOf(file.getFileName()), a.reviews());
    }

    static Path ledger(Path spec) {
        String name = String.valueOf(spec.getFileName());
        return spec.resolveSibling(name.substring(0, name.length() - ".drive".length()) + ".margins");
    }

    /** Whole or not at all. */
    private static void write(Path ledger, String text) throws IOException {
        Path folder = ledger.toAbsolutePath().getParent();
        Path part = Files.createTempFile(folder, ".margins", ".part");
        try {
            Files.writeString(part, text, StandardCharsets.UTF_8);
            try {
                Files.move(part, ledger, StandardCopyOption.REPLACE_EXISTING, StandardCopyOption.ATOMIC_MOVE);
            } catch (java.nio.file.AtomicMoveNotSupportedException e) {
                Files.move(part, ledger, StandardCopyOption.REPLACE_EXISTING);
            }
        } finally {
            Files.deleteIfExists(part);
        }
    }
}
