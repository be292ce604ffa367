package backcone.engine;

import backcone.engine.answers.DriveAnswer;
import backcone.engine.answers.RequirementAnswer;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.syntax.Entry;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import java.util.ArrayList;
import java.util.List;
import org.jspecify.annotations.Nullable;

/**
 * Places of an earlier text of a file in its present text, where the entries at its top are the same but for their place and
 * one number. So what was found out about an entry that nobody touched is found out no more, only moved.
 */
final class Moved {
    private final FileId file;
    private final List<Entry> before;
    private final List<Entry> now;
    private final @Nullable Span number;
    private final int longer;

    /** {@code number}: the place of the number in the earlier text; it is longer now by {@code longer} characters. */
    Moved(FileId file, List<Entry> before, List<Entry> now, @Nullable Span number, int longer) {
        this.file = file;
        this.before = before;
        this.now = now;
        this.number = number;
        this.longer = longer;
    }

    Span span(Span s) {
        if (before == now && number == null) {
            return s;
        }
        for (int i = 0; i < before.size(); i++) {
            Span old = before.get(i).span();
            if (old.start() <= s.start() && s.start() <= old.end()) {
                int by = now.get(i).span().start() - old.start();
                return new Span(start(s.start()) + by, Math.max(start(s.start()), end(s.end())) + by);
            }
        }
        return s;
    }

    private int start(int at) {
        Span n = number;
        return n == null || at < n.end() ? at : at + longer;
    }

    private int end(int at) {
        Span n = number;
        return n == null || at <= n.start() ? at : at + longer;
    }

    private Span in(FileId where, Span s) {
        return where.equals(file) ? span(s) : s;
    }

    List<Diagnostic> diagnostics(List<Diagnostic> all) {
        if (before == now && number == null) {
            return all;
        }
        List<Diagnostic> out = new ArrayList<>(all.size());
        for (Diagnostic d : all) {
            List<Diagnostic.Related> related = new ArrayList<>(d.related().size());
            for (Diagnostic.Related r : d.related()) {
                related.add(new Diagnostic.Related(r.file(), in(r.file(), r.span()), r.message()));
            }
            List<Diagnostic.Fix> fixes = new ArrayList<>(d.fixes().size());
            for (Diagnostic.Fix f : d.fixes()) {
                fixes.add(new Diagnostic.Fix(f.title(), in(d.file(), f.span()), f.newText()));
            }
            out.add(new Diagnostic(
                    d.code(),
                    d.severity(),
                    d.file(),
                    in(d.file(), d.span()),
                    d.message(),
                    List.copyOf(related),
                    List.copyOf(fixes)));
        }
        return out;
    }

    DriveAnswer answer(DriveAnswer a) {
        if (before == now && number == null) {
            return a;
        }
        List<RequirementAnswer> all = new ArrayList<>(a.requirements().size());
        for (RequirementAnswer r : a.requirements()) {
            all.add(r.at(in(r.file(), r.span())));
        }
        return new DriveAnswer(
                a.name(),
                a.title(),
                a.file(),
                in(a.file(), a.span()),
                List.copyOf(all),
                a.unrequired(),
                a.governing(),
                a.assumptions(),
                a.weakestTrust(),
                a.recalled());
    }
}
