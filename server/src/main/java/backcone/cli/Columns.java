package backcone.cli;

import java.io.PrintWriter;
import java.util.ArrayList;
import java.util.List;

/** A table with aligned columns; colour is added after the widths are known. */
final class Columns {
    private final String indent;
    private final List<List<String>> rows = new ArrayList<>();

    /** How a cell is painted, by its column and its row. */
    interface Paint {
        String of(int column, String cell, List<String> row);
    }

    Columns(String indent) {
        this.indent = indent;
    }

    void row(String... cells) {
        rows.add(List.of(cells));
    }

    void print(PrintWriter out, Paint paint) {
        int n = rows.stream().mapToInt(List::size).max().orElse(0);
        int[] width = new int[n];
        for (List<String> r : rows) {
            for (int i = 0; i < r.size(); i++) {
                width[i] =
                        Math.max(width[i], r.get(i).codePointCount(0, r.get(i).length()));
            }
        }
        if (rows.size() < 2) {
            return;
        }
        for (List<String> r : rows) {
            StringBuilder b = new StringBuilder(indent);
            for (int i = 0; i < r.size(); i++) {
                String cell = r.get(i);
                b.append(paint.of(i, cell, r));
                if (i < r.size() - 1) {
                    b.append(" ".repeat(width[i] - cell.codePointCount(0, cell.length()) + 2));
                }
            }
            out.println(b.toString().stripTrailing());
        }
    }
}
