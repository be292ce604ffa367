package backcone.cli;

import backcone.engine.Analysis;
import backcone.engine.BackconeEngine;
import backcone.engine.answers.DriveAnswer;
import backcone.engine.answers.RequirementAnswer;
import backcone.engine.model.Suggest;
import backcone.engine.text.FileId;
import backcone.git.Git;
import backcone.git.GitException;
import java.io.IOException;
import java.io.PrintWriter;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Set;
import org.jspecify.annotations.Nullable;

/** {@code backcone history}: one margin over the commits that touched its spec. */
final class HistoryCommand implements Command {
    private static final Usage USAGE = new Usage(
            "history",
            "Tells one margin over the commits that touched its spec, and which commit moved it most.",
            List.of(
                    new Usage.Operand("FILE", "a spec in a git repository", true, false),
                    new Usage.Operand(
                            "REQUIREMENT", "as `backcone check` prints it, such as head.main.pitting", true, false)),
            List.of(
                    Usage.Option.oneOf(
                            "--format", "FORMAT", "text, csv or svg; text unless said", "text", "csv", "svg"),
                    Usage.Option.value("--most", "COUNT", "so many commits at most; 100 unless said")),
            List.of(
                    "Commits that touched a library or method file which the spec uses today count, too. The spec is followed"
                            + " over renames.",
                    "Exit status: 0 told; 2 something can't be read; 64 wrong usage."),
            List.of(
                    "backcone history drives/washer.drive head.main.pitting",
                    "backcone history --format svg washer.drive head.main.pitting > pitting.svg"));

    /** One commit; the answer is null where the requirement was not there or the text did not parse. */
    private record Point(Git.Commit commit, @Nullable RequirementAnswer answer) {}

    @Override
    public Usage usage() {
        return USAGE;
    }

    @Override
    public int run(Arguments arguments, PrintWriter out, PrintWriter err)
            throws WrongUsage, IOException, InterruptedException {
        String name = String.valueOf(arguments.operand(1));
        Path file = FileSet.path(String.valueOf(arguments.operand(0)));
        int most = 100;
        try {
            most = Math.max(1, Integer.parseInt(arguments.value("--most", "100")));
        } catch (NumberFormatException e) {
            throw new WrongUsage(USAGE, "`--most` is a whole number.");
        }
        if (file == null) {
            err.println("backcone: `" + arguments.operand(0) + "` is no path.");
            return Status.WRONG_TEXT;
        }
        try {
            List<Point> points = points(file.toAbsolutePath().normalize(), name, most);
            if (points.stream().allMatch(p -> p.answer == null)) {
                err.println("backcone: no commit of `" + arguments.operand(0) + "` has a requirement `" + name + "`."
                        + near(file, name));
                return Status.WRONG_TEXT;
            }
            switch (arguments.value("--format", "text")) {
                case "csv" -> csv(points, out);
                case "svg" -> svg(name, points, out);
                default -> text(points, out);
            }
            return Status.FINE;
        } catch (GitException e) {
            err.println("backcone: " + e.getMessage() + ".");
            return Status.WRONG_TEXT;
        }
    }

    private static String near(Path file, String name) {
        EngineFactory e =
                new EngineFactory(FileSet.root(List.of(file.toAbsolutePath().normalize())), LedgerCommand.NO_DATE);
        Set<String> ids = new LinkedHashSet<>();
        e.analyse(file.toAbsolutePath().normalize())
                .drives()
                .forEach(d -> d.requirements().forEach(r -> ids.add(r.id())));
        return Suggest.sentence(name, ids);
    }

    /** Oldest first. */
    private static List<Point> points(Path file, String name, int most)
            throws GitException, IOException, InterruptedException {
        Git git = Git.at(file);
        Path top = git.root().toRealPath();
        Path whole = file.getParent() == null
                ? file
                : file.getParent().toRealPath().resolve(String.valueOf(file.getFileName()));
        if (!whole.startsWith(top)) {
            throw new GitException("`" + file + "` lies outside the repository `" + top + "`");
        }
        String path = top.relativize(whole).toString().replace('\\', '/');
        List<Git.Commit> own = git.log(path, most);
        if (own.isEmpty()) {
            throw new GitException("no commit has touched `" + path + "` yet");
        }
        Set<String> also = new LinkedHashSet<>();
        EngineFactory engine = new EngineFactory(top, LedgerCommand.NO_DATE);
        engine.analyse(file).uses().forEach(f -> {
            if (!f.isHandbook()) {
                also.add(f.path());
            }
        });
        List<Git.Commit> all = git.order(own, also, most);
        List<Point> out = new ArrayList<>();
        try (Git.Reader reader = git.reader()) {
            for (int i = all.size() - 1; i >= 0; i--) {
                Git.Commit c = all.get(i);
                Snapshot s = Snapshot.revision(git, c.id(), reader);
                Analysis a = BackconeEngine.create(s, LedgerCommand.NO_DATE).analyse(new FileId(c.path()));
                out.add(new Point(c, answer(a, name)));
            }
        }
        return out;
    }

    private static @Nullable RequirementAnswer answer(Analysis a, String name) {
        for (DriveAnswer d : a.drives()) {
            for (RequirementAnswer r : d.requirements()) {
                if (r.id().equals(name) || (d.name() + "." + r.id()).equals(name)) {
                    return r;
                }
            }
        }
        return null;
    }

    /** The point with the largest step from the one before; -1 when nothing moved. */
    private static int largest(List<Point> points) {
        int best = -1;
        double most = 1e-9;
        double before = Double.NaN;
        for (int i = 0; i < points.size(); i++) {
            RequirementAnswer r = points.get(i).answer;
            double m = r == null ? Double.NaN : r.margin();
            if (Double.isFinite(m) && Double.isFinite(before) && Math.abs(m - before) > most) {
                most = Math.abs(m - before);
                best = i;
            }
            if (Double.isFinite(m)) {
                before = m;
            }
        }
        return best;
    }

    private static void text(List<Point> points, PrintWriter out) {
        int best = largest(points);
        Columns t = new Columns("", 7, 2);
        t.row("day", "commit", "value", "required", "margin", "state", "subject");
        for (int i = 0; i < points.size(); i++) {
            Point p = points.get(i);
            RequirementAnswer r = p.answer;
            String subject = p.commit.subject() + (i == best ? "   ← moved it most" : "");
            if (r == null) {
                t.row(p.commit.day(), p.commit.id().substring(0, 8), "–", "", "", "", subject);
            } else {
                t.row(
                        p.commit.day(),
                        p.commit.id().substring(0, 8),
                        Figures.value(r),
                        Figures.required(r),
                        Figures.margin(r.margin(), r.comparison()),
                        r.state().word(),
                        subject);
            }
        }
        t.print(out, (c, cell, row) -> cell);
    }

    private static void csv(List<Point> points, PrintWriter out) {
        out.println("day,commit,author,value,unit,required,margin,state,subject");
        for (Point p : points) {
            RequirementAnswer r = p.answer;
            out.println(String.join(
                    ",",
                    p.commit.day(),
                    p.commit.id(),
                    quoted(p.commit.author()),
                    r == null ? "" : plain(r.value()),
                    r == null ? "" : quoted(r.unit()),
                    r == null ? "" : plain(r.required()),
                    r == null ? "" : plain(r.margin()),
                    r == null ? "" : r.state().word(),
                    quoted(p.commit.subject())));
        }
    }

    private static String plain(double v) {
        return Double.isFinite(v) ? Double.toString(v) : "";
    }

    private static String quoted(String s) {
        // a cell that begins like a formula is no formula
        String safe = !s.isEmpty() && "=+-@".indexOf(s.charAt(0)) >= 0 ? "'" + s : s;
        return "\"" + safe.replace("\"", "\"\"") + "\"";
    }

    private static void svg(String name, List<Point> points, PrintWriter out) {
        int w = 760;
        int h = 320;
        int left = 70;
        int top = 40;
        int right = 20;
        int bottom = 50;
        double lo = 0;
        double hi = 0;
        for (Point p : points) {
            if (p.answer != null && Double.isFinite(p.answer.margin())) {
                lo = Math.min(lo, p.answer.margin());
                hi = Math.max(hi, p.answer.margin());
            }
        }
        double span = Math.max(hi - lo, 0.01);
        lo -= span * 0.1;
        hi += span * 0.1;
        double sx = (double) (w - left - right) / Math.max(1, points.size() - 1);
        out.println("<svg xmlns=\"http://www.w3.org/2000/svg\" width=\"" + w + "\" height=\"" + h + "\" viewBox=\"0 0 "
                + w + " " + h + "\" font-family=\"sans-serif\" font-size=\"12\">");
        out.println("<title>Margin of " + xml(name) + "</title>");
        out.println("<rect width=\"100%\" height=\"100%\" fill=\"white\"/>");
        out.println("<text x=\"" + left + "\" y=\"22\" font-size=\"14\">Margin of " + xml(name) + "</text>");
        double step = tick(hi - lo);
        for (double t = Math.ceil(lo / step) * step; t <= hi; t += step) {
            long y = y(t, lo, hi, top, h - bottom);
            boolean zero = Math.abs(t) < step / 2;
            out.println("<line x1=\"" + left + "\" x2=\"" + (w - right) + "\" y1=\"" + y + "\" y2=\"" + y
                    + "\" stroke=\"" + (zero ? "black" : "#ddd") + "\"/>");
            out.println("<text x=\"" + (left - 8) + "\" y=\"" + (y + 4) + "\" text-anchor=\"end\">"
                    + Math.round(t * 1000) / 10.0 + " %</text>");
        }
        StringBuilder line = new StringBuilder();
        StringBuilder dots = new StringBuilder();
        int best = largest(points);
        boolean pen = false;
        for (int i = 0; i < points.size(); i++) {
            Point p = points.get(i);
            long x = Math.round(left + sx * i);
            if (p.answer == null || !Double.isFinite(p.answer.margin())) {
                pen = false;
                continue;
            }
            long y = y(p.answer.margin(), lo, hi, top, h - bottom);
            line.append(pen ? 'L' : 'M').append(x).append(' ').append(y).append(' ');
            pen = true;
            dots.append("<circle cx=\"")
                    .append(x)
                    .append("\" cy=\"")
                    .append(y)
                    .append("\" r=\"")
                    .append(i == best ? 6 : 3.5)
                    .append("\" fill=\"")
                    .append(p.answer.state().isMet() ? "#1b6ca8" : "#b3261e")
                    .append("\"><title>")
                    .append(xml(p.commit.day() + " " + p.commit.id().substring(0, 8) + " " + p.commit.subject() + ": "
                            + Figures.margin(p.answer.margin(), p.answer.comparison())))
                    .append("</title></circle>\n");
        }
        out.println(
                "<path d=\"" + line.toString().strip() + "\" fill=\"none\" stroke=\"#1b6ca8\" stroke-width=\"1.5\"/>");
        out.print(dots);
        out.println("<text x=\"" + left + "\" y=\"" + (h - 28) + "\">"
                + xml(points.get(0).commit.day()) + "</text>");
        out.println("<text x=\"" + (w - right) + "\" y=\"" + (h - 28) + "\" text-anchor=\"end\">"
                + xml(points.get(points.size() - 1).commit.day()) + "</text>");
        if (best >= 0) {
            Git.Commit c = points.get(best).commit;
            out.println("<text x=\"" + left + "\" y=\"" + (h - 8) + "\">moved most by "
                    + xml(c.id().substring(0, 8) + " " + c.subject()) + "</text>");
        }
        out.println("</svg>");
    }

    private static double tick(double span) {
        double t = Math.pow(10, Math.floor(Math.log10(span)));
        return span / t > 5 ? t : span / t > 2 ? t / 2 : t / 5;
    }

    private static long y(double v, double lo, double hi, int top, int bottom) {
        return Math.round(bottom - (v - lo) / (hi - lo) * (bottom - top));
    }

    private static String xml(String s) {
        return s.replace("&", "&amp;").replace("<", "&lt;").replace(">", "&gt;");
    }
}
