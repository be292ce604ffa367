package backcone.cli;

import backcone.engine.model.Suggest;
import java.io.BufferedWriter;
import java.io.File;
import java.io.FileDescriptor;
import java.io.FileOutputStream;
import java.io.IOException;
import java.io.OutputStreamWriter;
import java.io.PrintWriter;
import java.nio.charset.Charset;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.function.IntSupplier;
import java.util.function.Supplier;
import org.jspecify.annotations.Nullable;

/** The door for people and for CI: {@code backcone COMMAND}. */
public final class Main {
    private Main() {}

    private static IntSupplier server = () -> Status.INTERNAL;

    /** {@code serve} is what the language server does, from its first message to its exit status. */
    public static void main(String[] args, IntSupplier serve) {
        server = serve;
        PrintWriter out = writer(FileDescriptor.out, Terminal.out());
        PrintWriter err = writer(FileDescriptor.err, Terminal.err());
        int status = run(args, out, err);
        System.exit(status);
    }

    /** A spec that shows what there is. */
    public static String starter() {
        try {
            return StartCommand.text("straight-bevel");
        } catch (IOException e) {
            return "";
        }
    }

    static IntSupplier server() {
        return server;
    }

    /** UTF-8, except on a Windows terminal that says it shows something else. */
    private static PrintWriter writer(FileDescriptor to, boolean terminal) {
        Charset charset = StandardCharsets.UTF_8;
        if (terminal && File.separatorChar == '\\') {
            String shown = System.getProperty("stdout.encoding", System.getProperty("sun.stdout.encoding", "UTF-8"));
            charset = Charset.isSupported(shown) ? Charset.forName(shown) : charset;
        }
        return new PrintWriter(new BufferedWriter(new OutputStreamWriter(new FileOutputStream(to), charset), 1 << 15));
    }

    /** In the order of the help; a command is made when it is asked for. */
    private static final Map<String, Supplier<Command>> COMMANDS = new LinkedHashMap<>();

    static {
        COMMANDS.put("check", CheckCommand::new);
        COMMANDS.put("explain", ExplainCommand::new);
        COMMANDS.put("format", FormatCommand::new);
        COMMANDS.put("handbook", HandbookCommand::new);
        COMMANDS.put("start", StartCommand::new);
        COMMANDS.put("ledger", LedgerCommand::new);
        COMMANDS.put("compare", CompareCommand::new);
        COMMANDS.put("history", HistoryCommand::new);
        COMMANDS.put("register", RegisterCommand::new);
        COMMANDS.put("serve", ServeCommand::new);
    }

    static List<Command> commands() {
        List<Command> out = new ArrayList<>();
        COMMANDS.values().forEach(c -> out.add(c.get()));
        return out;
    }

    /** Runs a command line with its output going to the given writers; returns the exit status. */
    static int run(String[] args, PrintWriter out, PrintWriter err) {
        try {
            return command(Arrays.asList(args), out, err);
        } catch (WrongUsage e) {
            err.println("backcone: " + e.getMessage());
            err.println("`" + e.help() + "` tells what it takes.");
            return Status.WRONG_USAGE;
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
            err.println("backcone: interrupted.");
            return Status.INTERNAL;
        } catch (IOException | RuntimeException | StackOverflowError | OutOfMemoryError e) {
            Faults.report(null, e, err);
            return Status.INTERNAL;
        } finally {
            out.flush();
            err.flush();
        }
    }

    private static int command(List<String> args, PrintWriter out, PrintWriter err)
            throws WrongUsage, IOException, InterruptedException {
        String first = args.isEmpty() ? "--help" : args.get(0);
        switch (first) {
            case "--version":
            case "-V":
            case "version":
                out.println("backcone " + Version.TEXT);
                return Status.FINE;
            case "--help":
            case "-h":
                help(out);
                return Status.FINE;
            case "help": {
                Command asked = args.size() < 2 ? null : find(args.get(1));
                if (asked == null) {
                    help(out);
                } else {
                    asked.usage().print(out);
                }
                return Status.FINE;
            }
            case "self-test":
                return SelfTest.run();
            default:
        }
        Command c = find(first);
        if (c == null) {
            throw new WrongUsage(null, unknown(first));
        }
        Arguments a = Arguments.read(c.usage(), args.subList(1, args.size()));
        if (a.help()) {
            c.usage().print(out);
            return Status.FINE;
        }
        return c.run(a, out, err);
    }

    private static @Nullable Command find(String name) {
        Supplier<Command> c = COMMANDS.get(name);
        return c == null ? null : c.get();
    }

    private static String unknown(String typed) {
        if (typed.startsWith("-")) {
            return "there is no option `" + typed + "` before the command."
                    + Suggest.sentence(typed, List.of("--help", "--version"));
        }
        if (typed.endsWith(".drive") || new File(typed).exists()) {
            return "`" + typed + "` is no command. Did you mean `backcone check " + typed + "`?";
        }
        List<String> names = new ArrayList<>();
        for (Command c : commands()) {
            names.add(c.usage().name());
        }
        String near = Suggest.nearest(typed, names);
        return "there is no command `" + typed + "`."
                + (near == null ? " It is one of " + String.join(", ", names) + "." : " Did you mean `" + near + "`?");
    }

    private static void help(PrintWriter out) {
        out.println("Rates gear drives written as text.");
        out.println();
        Usage.wrap(
                "A spec (.drive) says what a drive is and what is required of it; backcone says whether it is met, with which"
                        + " margin, what is missing, and how every number came about.",
                0,
                0,
                out);
        out.println();
        out.println("  backcone COMMAND …");
        out.println();
        List<String[]> pairs = new ArrayList<>();
        for (Command c : commands()) {
            pairs.add(new String[] {c.usage().name(), c.usage().summary()});
        }
        Usage.pairs(pairs, out);
        out.println();
        out.println("`backcone COMMAND --help` tells what a command takes; `backcone --version` which");
        out.println("version this is.");
        out.println();
        out.println("Examples");
        out.println("  backcone check samples                          every spec below a folder");
        out.println("  backcone explain head.drive head.ratio          how a number came about");
        out.println("  backcone start straight-bevel > head.drive      a commented spec to begin");
        out.println();
        Usage.wrap(Caution.TEXT, 0, 0, out);
    }
}
