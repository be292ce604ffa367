package backcone.engine.fixes;

import backcone.engine.parse.Formatter;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.HashMap;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;

/** A text in the canonical layout stays in it: what a fix puts out of its column is part of the fix. */
final class Tidy {
    private static final int MOST_CELLS = 400_000;
    private final Subject subject;
    private final Map<FileId, Boolean> canonical = new HashMap<>();

    Tidy(Subject subject) {
        this.subject = subject;
    }

    Fix of(Fix fix) {
        Map<FileId, List<TextEdit>> byFile = new LinkedHashMap<>();
        for (TextEdit e : fix.edits()) {
            byFile.computeIfAbsent(e.file(), k -> new ArrayList<>()).add(e);
        }
        List<TextEdit> out = new ArrayList<>();
        byFile.forEach((f, edits) -> out.addAll(tidied(f, edits)));
        return new Fix(fix.title(), fix.kind(), fix.preferred(), List.copyOf(out), fix.codes());
    }

    private List<TextEdit> tidied(FileId f, List<TextEdit> edits) {
        String old = f.equals(subject.file()) ? subject.text() : subject.textOf(f);
        if (old == null
                || !canonical.computeIfAbsent(
                        f, k -> old.equals(Formatter.format(f, old).text()))) {
            return edits;
        }
        String edited = apply(old, edits);
        String formatted = Formatter.format(f, edited).text();
        return formatted == null || formatted.equals(edited) ? edits : difference(f, old, formatted);
    }

    static String apply(String text, List<TextEdit> edits) {
        StringBuilder b = new StringBuilder(text);
        edits.stream()
                .sorted(Comparator.comparingInt((TextEdit e) -> e.span().start())
                        .reversed())
                .forEach(e -> b.replace(e.span().start(), e.span().end(), e.text()));
        return b.toString();
    }

    /** The lines that differ, as small edits. */
    static List<TextEdit> difference(FileId f, String old, String now) {
        List<String> a = lines(old);
        List<String> b = lines(now);
        int from = 0;
        while (from < a.size() && from < b.size() && a.get(from).equals(b.get(from))) {
            from++;
        }
        int ends = 0;
        while (ends < a.size() - from
                && ends < b.size() - from
                && a.get(a.size() - 1 - ends).equals(b.get(b.size() - 1 - ends))) {
            ends++;
        }
        List<String> x = a.subList(from, a.size() - ends);
        List<String> y = b.subList(from, b.size() - ends);
        int at = 0;
        for (String line : a.subList(0, from)) {
            at += line.length();
        }
        List<TextEdit> out = new ArrayList<>();
        if ((long) x.size() * y.size() > MOST_CELLS) {
            hunk(f, at, x, y, out);
            return out;
        }
        int[][] common = new int[x.size() + 1][y.size() + 1];
        for (int i = x.size() - 1; i >= 0; i--) {
            for (int j = y.size() - 1; j >= 0; j--) {
                common[i][j] = x.get(i).equals(y.get(j))
                        ? common[i + 1][j + 1] + 1
                        : Math.max(common[i + 1][j], common[i][j + 1]);
            }
        }
        int i = 0;
        int j = 0;
        while (i < x.size() || j < y.size()) {
            int i0 = i;
            int j0 = j;
            while (i < x.size() || j < y.size()) {
                if (i < x.size() && j < y.size() && x.get(i).equals(y.get(j))) {
                    break;
                }
                if (j >= y.size() || i < x.size() && common[i + 1][j] >= common[i][j + 1]) {
                    i++;
                } else {
                    j++;
                }
            }
            hunk(f, at, x.subList(i0, i), y.subList(j0, j), out);
            for (String line : x.subList(i0, i)) {
                at += line.length();
            }
            while (i < x.size() && j < y.size() && x.get(i).equals(y.get(j))) {
                at += x.get(i).length();
                i++;
                j++;
            }
        }
        return out;
    }

    /** Line by line where as many come as go, else in one piece. */
    private static void hunk(FileId f, int at, List<String> old, List<String> now, List<TextEdit> out) {
        if (old.size() == now.size()) {
            int here = at;
            for (int k = 0; k < old.size(); k++) {
                piece(f, here, old.get(k), now.get(k), out);
                here += old.get(k).length();
            }
        } else {
            piece(f, at, String.join("", old), String.join("", now), out);
        }
    }

    private static void piece(FileId f, int at, String old, String now, List<TextEdit> out) {
        if (old.equals(now)) {
            return;
        }
        int from = 0;
        int most = Math.min(old.length(), now.length());
        while (from < most && old.charAt(from) == now.charAt(from)) {
            from++;
        }
        int ends = 0;
        while (ends < most - from && old.charAt(old.length() - 1 - ends) == now.charAt(now.length() - 1 - ends)) {
            ends++;
        }
        out.add(new TextEdit(
                f, new Span(at + from, at + old.length() - ends), now.substring(from, now.length() - ends)));
    }

    private static List<String> lines(String text) {
        List<String> out = new ArrayList<>();
        int from = 0;
        while (from < text.length()) {
            int i = text.indexOf('\n', from);
            int to = i < 0 ? text.length() : i + 1;
            out.add(text.substring(from, to));
            from = to;
        }
        return out;
    }
}
