package backcone.engine.parse;

import java.util.ArrayList;
import java.util.List;

/** Lines up {@code =}, {@code =>}, bars and trailing notes within runs of neighbouring lines. */
final class Columns {
    private Columns() {}

    static void align(List<Line> lines) {
        for (Line line : lines) {
            line.end();
        }
        int from = 0;
        while (from < lines.size()) {
            int end = from + 1;
            int run = lines.get(from).run;
            while (run != 0 && end < lines.size() && lines.get(end).run == run) {
                end++;
            }
            alignRun(lines.subList(from, end));
            from = end;
        }
    }

    private static void alignRun(List<Line> run) {
        for (Line.Stop stop : Line.Stop.values()) {
            boolean again = true;
            while (again) {
                // bars come again and again on one line
                again = alignOnce(run, stop) && stop == Line.Stop.BAR;
            }
        }
    }

    private static boolean alignOnce(List<Line> run, Line.Stop stop) {
        List<Line> waiting = new ArrayList<>(run.size());
        for (Line line : run) {
            if (line.pending() == stop) {
                waiting.add(line);
            }
        }
        if (waiting.isEmpty()) {
            return false;
        }
        List<Line> done = new ArrayList<>();
        for (Line first : waiting) {
            if (done.contains(first)) {
                continue;
            }
            List<Line> group = new ArrayList<>();
            for (Line line : waiting) {
                if (!stop.isOfOneKind() || line.kind == first.kind) {
                    group.add(line);
                }
            }
            done.addAll(group);
            int column = 0;
            for (Line line : group) {
                if (line.width() - line.indent <= stop.cap) {
                    column = Math.max(column, line.width() + stop.gap);
                }
            }
            for (Line line : group) {
                line.place(line.width() - line.indent <= stop.cap ? column : 0);
            }
        }
        return true;
    }
}
