package backcone.engine.fixes;

import backcone.engine.answers.DriveAnswer;
import backcone.engine.answers.RequirementAnswer;
import backcone.engine.answers.State;
import backcone.engine.diagnostics.Code;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.Element;
import backcone.engine.graph.Slot;
import backcone.engine.model.Decl;
import backcone.engine.model.ValueKind;
import backcone.engine.syntax.Entry;
import backcone.engine.syntax.Expr;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import java.util.ArrayList;
import java.util.IdentityHashMap;
import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import org.jspecify.annotations.Nullable;

/**
 * What an open requirement waits for, as facts to fill in. A value is never proposed as if it were known: the place behind
 * {@code =} stays empty, which is an error until something stands there; unit, range and meaning stand in a comment.
 */
final class MissingInputs {
    private final Subject subject;
    private final Trial trial;

    MissingInputs(Subject subject, Trial trial) {
        this.subject = subject;
        this.trial = trial;
    }

    List<Fix> at(Span range) {
        List<Fix> out = new ArrayList<>();
        for (DriveAnswer d : subject.drives()) {
            Map<String, Slot> waited = new LinkedHashMap<>();
            Set<String> ids = new LinkedHashSet<>();
            Set<String> all = new LinkedHashSet<>();
            for (RequirementAnswer r : d.requirements()) {
                boolean open = r.state() == State.OPEN && r.file().equals(subject.file());
                for (RequirementAnswer.Missing m : r.missing()) {
                    if (open) {
                        all.add(m.path());
                    }
                }
                if (open && Fixes.touches(r.span(), range)) {
                    ids.add(r.id());
                    for (RequirementAnswer.Missing m : r.missing()) {
                        Slot s = find(d.name(), m.path());
                        if (s != null) {
                            waited.put(m.path(), s);
                        }
                    }
                }
            }
            boolean byFinding = waited.isEmpty();
            if (byFinding) {
                for (Diagnostic f : subject.diagnostics()) {
                    if (f.code() == Code.MISSING_INPUT && Fixes.touches(f.span(), range)) {
                        for (String path : all) {
                            Slot s = find(d.name(), path);
                            if (s != null && f.message().contains("`" + path + "`")) {
                                waited.put(path, s);
                            }
                        }
                    }
                }
            }
            if (waited.isEmpty()) {
                continue;
            }
            List<TextEdit> edits = edits(waited.values());
            if (edits.isEmpty()) {
                continue;
            }
            int n = waited.size();
            String what = n == 1 ? "`" + waited.keySet().iterator().next() + "`" : n + " missing inputs";
            String where = byFinding || ids.size() > 1 || ids.isEmpty()
                    ? ""
                    : " of `" + ids.iterator().next() + "`";
            out.add(new Fix(
                    "add " + what + where + " to fill in",
                    Fix.Kind.QUICK_FIX,
                    true,
                    edits,
                    List.of(Code.MISSING_INPUT.id())));
            break;
        }
        return out;
    }

    private @Nullable Slot find(String drive, String path) {
        for (DriveGraph g : trial.graphs(drive)) {
            Slot s = g.find(path);
            if (s != null) {
                return s;
            }
        }
        return null;
    }

    /** One edit per block that exists; blocks that don't exist yet are written inside the first one above that does. */
    private List<TextEdit> edits(Iterable<Slot> slots) {
        Map<Element, Map<List<String>, List<Slot>>> homes = new IdentityHashMap<>();
        List<Element> order = new ArrayList<>();
        for (Slot s : slots) {
            List<String> inner = new ArrayList<>();
            Element e = s.owner;
            while (e != null && !written(e)) {
                inner.add(0, e.name);
                e = e.parent;
            }
            if (e == null) {
                continue;
            }
            if (!homes.containsKey(e)) {
                order.add(e);
            }
            homes.computeIfAbsent(e, k -> new LinkedHashMap<>())
                    .computeIfAbsent(inner, k -> new ArrayList<>())
                    .add(s);
        }
        List<TextEdit> out = new ArrayList<>();
        for (Element e : order) {
            List<String> lines = new ArrayList<>();
            Map<List<String>, List<Slot>> home = java.util.Objects.requireNonNull(homes.get(e));
            List<Slot> own = home.remove(List.<String>of());
            if (own != null) {
                TextEdit t = Edits.afterFacts(subject.file(), subject.text(), body(e.span()), facts(own));
                if (t != null) {
                    out.add(t);
                } else {
                    lines.addAll(aligned(own, ""));
                }
            }
            home.forEach((inner, list) -> {
                String in = "";
                for (String name : inner) {
                    lines.add(in + name + " {");
                    in += "  ";
                }
                lines.addAll(aligned(list, in));
                for (int i = inner.size() - 1; i >= 0; i--) {
                    lines.add("  ".repeat(i) + "}");
                }
            });
            if (!lines.isEmpty()) {
                out.add(Edits.atEndOf(subject.file(), subject.text(), e.span(), lines));
            }
        }
        return out;
    }

    private boolean written(Element e) {
        FileId f = e.fileOrNull();
        return f != null
                && f.equals(subject.file())
                && e.span().length() > 0
                && subject.text().substring(e.span().start(), e.span().end()).endsWith("}");
    }

    private List<Entry> body(Span at) {
        List<Entry> out = new ArrayList<>();
        Walk.all(subject.syntax(), n -> {
            if (n instanceof Entry.Block b && b.span().equals(at) && b.body() != null) {
                out.addAll(b.body());
            } else if (n instanceof Entry.Drive d && d.span().equals(at)) {
                out.addAll(d.body());
            }
        });
        return out;
    }

    /** Names, and what stands behind them. */
    private List<String[]> facts(List<Slot> slots) {
        Set<String> seen = new LinkedHashSet<>();
        List<String[]> out = new ArrayList<>();
        for (Slot s : slots) {
            if (seen.add(s.decl.name)) {
                out.add(new String[] {s.decl.name, " =     # " + hint(s.decl)});
            }
        }
        return out;
    }

    private List<String> aligned(List<Slot> slots, String in) {
        List<String[]> all = facts(slots);
        int width = all.stream().mapToInt(f -> f[0].length()).max().orElse(0);
        return all.stream()
                .map(f -> in + f[0] + " ".repeat(width - f[0].length()) + f[1])
                .toList();
    }

    /** {@code mm, 0.5 mm to 3000 mm: face width of the mesh}. */
    private String hint(Decl d) {
        StringBuilder b = new StringBuilder();
        if (d.kind instanceof ValueKind.Quantity q) {
            String unit = q.kind().shown().text();
            b.append(unit.equals("1") ? (q.kind().whole() ? "a whole number" : "a number") : "in " + unit);
        } else if (d.kind instanceof ValueKind.Choice c) {
            b.append(String.join(" or ", c.kind().words().keySet()));
        } else if (d.kind instanceof ValueKind.Reference r) {
            b.append("a ").append(r.kind()).append(" by its name");
        }
        if (d.range != null) {
            b.append(", ").append(text(d, d.range.low())).append(" to ").append(text(d, d.range.high()));
        }
        if (d.meaning != null) {
            b.append(": ").append(d.meaning);
        }
        if (d.offer != null) {
            b.append("; customary: ").append(text(d, d.offer));
        }
        return b.toString();
    }

    private String text(Decl d, Expr e) {
        String t = subject.textOf(d.file);
        return t == null || e.span().end() > t.length()
                ? "…"
                : t.substring(e.span().start(), e.span().end()).replaceAll("\\s+", " ");
    }
}
