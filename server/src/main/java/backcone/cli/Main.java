package backcone.cli;

import java.io.PrintStream;
import java.io.PrintWriter;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import picocli.CommandLine;
import picocli.CommandLine.Command;

/** The door for people and for CI: {@code backcone COMMAND}. */
@Command(
        name = "backcone",
        mixinStandardHelpOptions = true,
        version = "backcone 0.1.0",
        synopsisSubcommandLabel = "COMMAND",
        header = "Rates gear drives written as text.",
        description = {
            "",
            "A spec (.drive) says what a drive is and what is required of it; backcone says whether it is met, with which margin,"
                    + " and how every number came about.",
            ""
        },
        subcommands = {
            CheckCommand.class,
            ExplainCommand.class,
            FormatCommand.class,
            HandbookCommand.class,
            StartCommand.class,
            SelfTestCommand.class
        },
        footer = {
            "",
            "Examples:",
            "  backcone check samples                               every spec below a folder",
            "  backcone explain head.drive head.outer_cone_distance       how a number came about",
            "  backcone start straight-bevel > head.drive           a commented spec to begin with",
            "",
            Caution.TEXT
        })
public final class Main implements Runnable {
    static final int WRONG_USAGE = 64;
    static final int INTERNAL = 70;

    @Override
    public void run() {
        CommandLine.usage(this, System.out);
    }

    public static void main(String[] args) {
        System.setOut(new PrintStream(
                new java.io.FileOutputStream(java.io.FileDescriptor.out), false, StandardCharsets.UTF_8));
        System.setErr(new PrintStream(
                new java.io.FileOutputStream(java.io.FileDescriptor.err), true, StandardCharsets.UTF_8));
        int status = run(
                args,
                new PrintWriter(System.out, false, StandardCharsets.UTF_8),
                new PrintWriter(System.err, true, StandardCharsets.UTF_8));
        System.out.flush();
        System.exit(status);
    }

    /** Runs a command line with its output going to the given writers; returns the exit status. */
    static int run(String[] args, PrintWriter out, PrintWriter err) {
        CommandLine line = new CommandLine(new Main());
        line.setOut(out);
        line.setErr(err);
        line.setColorScheme(CommandLine.Help.defaultColorScheme(
                Terminal.colour() ? CommandLine.Help.Ansi.ON : CommandLine.Help.Ansi.OFF));
        line.setParameterExceptionHandler((e, a) -> wrongUsage(e, err));
        line.setExecutionExceptionHandler((e, l, r) -> internal(e, err));
        int status = line.execute(args);
        out.flush();
        err.flush();
        return status;
    }

    private static int wrongUsage(CommandLine.ParameterException e, PrintWriter err) {
        err.println("backcone: " + e.getMessage() + ".");
        List<String> may = new ArrayList<>();
        if (e instanceof CommandLine.UnmatchedArgumentException u) {
            String typed = u.getUnmatched().isEmpty() ? "" : u.getUnmatched().get(0);
            if (e.getCommandLine().getParent() == null && !typed.startsWith("-")) {
                may.addAll(commands(e.getCommandLine()));
            } else {
                e.getCommandLine().getCommandSpec().options().forEach(o -> may.addAll(Arrays.asList(o.names())));
            }
            String near = backcone.engine.model.Suggest.nearest(typed, may);
            if (near != null) {
                err.println("Did you mean `" + near + "`?");
            }
        }
        String name = e.getCommandLine().getCommandSpec().qualifiedName();
        err.println("`" + name + " --help` tells what it takes.");
        return WRONG_USAGE;
    }

    private static List<String> commands(CommandLine line) {
        List<String> out = new ArrayList<>();
        line.getSubcommands().forEach((k, v) -> {
            if (!v.getCommandSpec().usageMessage().hidden()) {
                out.add(k);
            }
        });
        return out;
    }

    private static int internal(Exception e, PrintWriter err) {
        err.println(
                "backcone: a fault of the program, not of your text. Nothing was written. Please report the lines below with the spec that led here.");
        err.println(
                "backcone 0.1.0, Java " + System.getProperty("java.version") + ", " + System.getProperty("os.name"));
        e.printStackTrace(err);
        return INTERNAL;
    }
}
