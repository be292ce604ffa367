package backcone.cli;

import java.io.PrintWriter;
import java.util.ArrayList;
import java.util.List;
import org.jspecify.annotations.Nullable;

/**
 * What a command is called, takes and does: the one description from which its command line is read and its help is
 * printed. Read by hand, since a library for it would cost more of a start than the rest of the command.
 */
record Usage(
        String name,
        String summary,
        List<Operand> operands,
        List<Option> options,
        List<String> remarks,
        List<String> examples) {
    static final int WIDTH = 80;

    /** A word in its place. {@code many} takes all that are left. */
    record Operand(String label, String meaning, boolean required, boolean many) {}

    /** {@code --name} or {@code --name VALUE}; {@code values} lists the words it may be, empty for any. */
    record Option(String name, @Nullable String label, String meaning, List<String> values) {
        static Option flag(String name, String meaning) {
            return new Option(name, null, meaning, List.of());
        }

        static Option value(String name, String label, String meaning) {
            return new Option(name, label, meaning, List.of());
        }

        static Option oneOf(String name, String label, String meaning, String... values) {
            return new Option(name, label, meaning, List.of(values));
        }
    }

    @Nullable
    Option option(String typed) {
        for (Option o : options) {
            if (o.name().equals(typed)) {
                return o;
            }
        }
        return null;
    }

    List<String> optionNames() {
        List<String> out = new ArrayList<>();
        for (Option o : options) {
            out.add(o.name());
        }
        out.add("--help");
        return out;
    }

    /** {@code backcone check [--format FORMAT] [PATH…]} */
    String synopsis() {
        StringBuilder b = new StringBuilder("backcone ").append(name);
        for (Option o : options) {
            b.append(" [").append(o.name());
            if (o.label() != null) {
                b.append(' ').append(o.label());
            }
            b.append(']');
        }
        for (Operand o : operands) {
            String label = o.many() ? o.label() + "…" : o.label();
            b.append(' ').append(o.required() ? label : "[" + label + "]");
        }
        return b.toString();
    }

    void print(PrintWriter out) {
        wrap(summary, 0, 0, out);
        out.println();
        wrap(synopsis(), 2, 6, out);
        List<String[]> pairs = new ArrayList<>();
        for (Operand o : operands) {
            pairs.add(new String[] {o.label(), o.meaning()});
        }
        for (Option o : options) {
            pairs.add(new String[] {o.label() == null ? o.name() : o.name() + " " + o.label(), o.meaning()});
        }
        if (!pairs.isEmpty()) {
            out.println();
            pairs(pairs, out);
        }
        for (String r : remarks) {
            out.println();
            wrap(r, 0, 0, out);
        }
        out.println();
        out.println("Examples");
        for (String e : examples) {
            out.println("  " + e);
        }
    }

    /** Two columns, the second wrapped below itself. */
    static void pairs(List<String[]> pairs, PrintWriter out) {
        int left = 0;
        for (String[] p : pairs) {
            left = Math.max(left, p[0].length());
        }
        for (String[] p : pairs) {
            wrap(p[0] + " ".repeat(left + 3 - p[0].length()) + p[1], 2, left + 5, out);
        }
    }

    /** Breaks at blanks; the first line is indented by {@code first}, the others by {@code rest}. */
    static void wrap(String text, int first, int rest, PrintWriter out) {
        wrap(text, first, rest, WIDTH, out);
    }

    static void wrap(String text, int first, int rest, int width, PrintWriter out) {
        String left = text;
        int indent = first;
        while (indent + left.length() > width) {
            int cut = left.lastIndexOf(' ', width - indent);
            if (cut <= rest - indent || left.substring(0, cut).isBlank()) {
                cut = left.indexOf(' ', Math.max(1, width - indent));
                if (cut < 0) {
                    break;
                }
            }
            out.println((" ".repeat(indent) + left.substring(0, cut)).stripTrailing());
            left = left.substring(cut).stripLeading();
            indent = rest;
        }
        out.println((" ".repeat(indent) + left).stripTrailing());
    }
}
