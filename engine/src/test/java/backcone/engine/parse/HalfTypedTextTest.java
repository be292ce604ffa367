package backcone.engine.parse;

import static org.assertj.core.api.Assertions.assertThat;

import backcone.engine.syntax.Entry;
import java.io.IOException;
import java.util.ArrayList;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import java.util.regex.Pattern;
import org.junit.jupiter.api.Test;

/**
 * Every line cut at every fourth column, as if it were being typed. Entries that the cut does not touch must survive
 * with their text and nesting, and a cut line may cost one finding.
 */
class HalfTypedTextTest {
    private static final Pattern BLANKS = Pattern.compile("\\s+");

    /** Where an entry stands among others, and what of it stands on its first lines, the body left out. */
    private record Item(String key, int start, int end) {}

    private static final class Tally {
        int cuts;
        int withLosses;
        int lost;
        int findings;
        int withMore;

        @Override
        public String toString() {
            return String.format(
                    "%d cuts, %d lost a neighbour (%d entries), %d findings, %d cuts with more than one",
                    cuts, withLosses, lost, findings, withMore);
        }
    }

    @Test
    void neighboursSurvive() {
        Tally plain = new Tally();
        Tally braces = new Tally();
        for (String name : Texts.NAMES) {
            cutAll(Texts.read(name), plain, braces);
        }
        System.out.println("lines without braces: " + plain);
        System.out.println("lines with braces:    " + braces);
        check(plain, braces);
    }

    /** The same for every sample and every library that samples use. */
    @Test
    void neighboursSurviveInSamples() throws IOException {
        Tally plain = new Tally();
        Tally braces = new Tally();
        for (String text : Texts.samples()) {
            cutAll(text, plain, braces);
        }
        System.out.println("samples, lines without braces: " + plain);
        System.out.println("samples, lines with braces:    " + braces);
        assertThat(plain.cuts).isGreaterThan(5000);
        check(plain, braces);
    }

    private static void check(Tally plain, Tally braces) {
        assertThat(plain.withLosses).isLessThanOrEqualTo(plain.cuts / 200);
        assertThat(plain.withMore).isZero();
        assertThat(braces.withLosses).isLessThanOrEqualTo(braces.cuts / 50);
        assertThat(braces.withMore).isLessThanOrEqualTo(braces.cuts / 100);
    }

    private static void cutAll(String text, Tally plain, Tally braces) {
        List<Entry> entries = Texts.parse(text).tree().entries();
        List<Item> nested = items(entries, text, true);
        List<Item> flat = items(entries, text, false);
        int start = 0;
        while (start < text.length()) {
            int end = text.indexOf('\n', start);
            String line = text.substring(start, end);
            boolean brace = line.contains("{") || line.contains("}");
            for (int column = 0; column < line.length(); column += 4) {
                String left = line.substring(column).strip();
                if (!left.isEmpty()
                        && !left.startsWith("#")
                        && !line.substring(0, column).isBlank()) {
                    cut(text, brace ? flat : nested, start + column, end, !brace, brace ? braces : plain);
                }
            }
            start = end + 1;
        }
    }

    private static void cut(String text, List<Item> whole, int at, int end, boolean nested, Tally tally) {
        String cut = text.substring(0, at) + text.substring(end);
        Parser.Parsed parsed = Texts.parse(cut);
        Map<String, Integer> there = new HashMap<>();
        for (Item i : items(parsed.tree().entries(), cut, nested)) {
            there.merge(i.key(), 1, Integer::sum);
        }
        int lost = 0;
        for (Item i : whole) {
            boolean touched = i.start() < end && i.end() > at - 2;
            if (!touched && there.merge(i.key(), -1, Integer::sum) < 0) {
                lost++;
            }
        }
        tally.cuts++;
        tally.lost += lost;
        tally.withLosses += lost > 0 ? 1 : 0;
        tally.findings += parsed.problems().size();
        tally.withMore += parsed.problems().size() > 1 ? 1 : 0;
    }

    private static List<Item> items(List<Entry> entries, String text, boolean nested) {
        List<Item> out = new ArrayList<>();
        items(entries, text, nested ? "" : "0", nested, out);
        return out;
    }

    /** With braces cut, the heads around an entry change, so only its depth is compared. */
    private static void items(List<Entry> entries, String text, String parent, boolean nested, List<Item> out) {
        for (Entry e : entries) {
            String own = text.substring(e.span().start(), e.span().end());
            List<Entry> body = body(e);
            int brace = body == null ? -1 : own.indexOf('{');
            int end = brace < 0 ? e.span().end() : e.span().start() + brace;
            String head = text.substring(e.span().start(), end).strip();
            head = BLANKS.matcher(head).replaceAll(" ");
            out.add(new Item(
                    parent + "/" + e.getClass().getSimpleName() + ":" + head,
                    e.span().start(),
                    end));
            if (body != null) {
                String inner = nested ? parent + "/" + head : String.valueOf(Integer.parseInt(parent) + 1);
                items(body, text, inner, nested, out);
            }
        }
    }

    private static @org.jspecify.annotations.Nullable List<Entry> body(Entry e) {
        if (e instanceof Entry.Block x) {
            return x.body();
        } else if (e instanceof Entry.Drive x) {
            return x.body();
        } else if (e instanceof Entry.Rate x) {
            return x.body();
        } else if (e instanceof Entry.Variant x) {
            return x.body();
        } else if (e instanceof Entry.Kind x) {
            return x.body();
        } else if (e instanceof Entry.Chapter x) {
            return x.body();
        } else if (e instanceof Entry.Method x) {
            return x.body();
        } else if (e instanceof Entry.Each x) {
            return x.body();
        } else if (e instanceof Entry.Example x) {
            return x.body();
        }
        return null;
    }
}
