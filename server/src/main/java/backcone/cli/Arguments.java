package backcone.cli;

import backcone.engine.model.Suggest;
import java.util.ArrayList;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;

/** A command line after its {@link Usage}: every option is known, every value allowed, nothing is missing or too much. */
final class Arguments {
    private final Usage usage;
    private final List<String> operands = new ArrayList<>();
    private final Map<String, String> options = new HashMap<>();
    private boolean help;

    private Arguments(Usage usage) {
        this.usage = usage;
    }

    static Arguments read(Usage usage, List<String> words) throws WrongUsage {
        Arguments a = new Arguments(usage);
        boolean onlyOperands = false;
        for (int i = 0; i < words.size(); i++) {
            String w = words.get(i);
            if (onlyOperands || !w.startsWith("-") || w.equals("-")) {
                a.operands.add(w);
            } else if (w.equals("--")) {
                onlyOperands = true;
            } else if (w.equals("--help") || w.equals("-h")) {
                a.help = true;
                return a;
            } else {
                i = a.option(words, i);
            }
        }
        a.count();
        return a;
    }

    /** Reads the option at {@code at}; returns the index of its last word. */
    private int option(List<String> words, int at) throws WrongUsage {
        String word = words.get(at);
        int equals = word.indexOf('=');
        String name = equals < 0 ? word : word.substring(0, equals);
        Usage.Option o = usage.option(name);
        if (o == null) {
            throw new WrongUsage(
                    usage,
                    "`" + usage.name() + "` has no option `" + name + "`."
                            + Suggest.sentence(name, usage.optionNames()));
        }
        if (o.label() == null) {
            if (equals >= 0) {
                throw new WrongUsage(usage, "`" + name + "` takes no value.");
            }
            options.put(name, "");
            return at;
        }
        String value;
        int last = at;
        if (equals >= 0) {
            value = word.substring(equals + 1);
        } else if (at + 1 < words.size()) {
            last = at + 1;
            value = words.get(last);
        } else {
            value = "";
        }
        if (value.isEmpty()) {
            throw new WrongUsage(usage, "`" + name + "` needs a value: " + o.meaning() + ".");
        }
        if (!o.values().isEmpty() && !o.values().contains(value)) {
            String near = Suggest.nearest(value, o.values());
            throw new WrongUsage(
                    usage,
                    "`" + name + "` can't be `" + value + "`."
                            + (near == null
                                    ? " It is one of " + String.join(", ", o.values()) + "."
                                    : " Did you mean `" + near + "`?"));
        }
        options.put(name, value);
        return last;
    }

    private void count() throws WrongUsage {
        int needed = 0;
        boolean many = false;
        for (Usage.Operand o : usage.operands()) {
            needed += o.required() ? 1 : 0;
            many |= o.many();
        }
        if (operands.size() < needed) {
            Usage.Operand o = usage.operands().get(operands.size());
            throw new WrongUsage(usage, "`" + usage.name() + "` needs " + o.label() + ": " + o.meaning() + ".");
        }
        if (!many && operands.size() > usage.operands().size()) {
            throw new WrongUsage(
                    usage,
                    "`" + operands.get(usage.operands().size()) + "` is one word too many for `" + usage.name() + "`.");
        }
    }

    boolean help() {
        return help;
    }

    List<String> operands() {
        return operands;
    }

    @Nullable
    String operand(int index) {
        return index < operands.size() ? operands.get(index) : null;
    }

    boolean has(String option) {
        return options.containsKey(option);
    }

    @Nullable
    String value(String option) {
        return options.get(option);
    }

    String value(String option, String otherwise) {
        return options.getOrDefault(option, otherwise);
    }

    Usage usage() {
        return usage;
    }
}
