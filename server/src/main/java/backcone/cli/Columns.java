package backcone.cli;

import java.io.PrintWriter;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;

/** A table with aligned columns: words to the left, numbers by their decimal point. Paint is added after the widths. */
final class Columns {
    private final String indent;
    private final boolean[] byPoint;
    private final List<List<String>> rows = new ArrayList<>();

    /** How a cell is painted, by its column and its row. */
    interface Paint {
        String of(int column, String cell, List<String> row);
    }

    /** {@code numbers} are the columns to align by the decimal point, from 0; the first row is a head of words. */
    Columns(String indent, int columns, int... numbers) {
        this.indent = indent;
        this.byPoint = new boolean[columns];
        for (int n : numbers) {
            byPoint[n] = true;
        }
    }

    void row(String... cells) {
        rows.add(Arrays.asList(cells));
    }

    boolean isEmpty() {
        return rows.size() < 2;
    }

    void print(PrintWriter out, Paint paint) {
        for (int i = 0; i < byPoint.length; i++) {
            if (byPoint[i]) {
                align(i);
            }
        }
        int[] width = new int[byPoint.length];
        for (List<String> r : rows) {
            for (int i = 0; i < width.length; i++) {
                width[i] = Math.max(width[i], length(r.get(i)));
            }
        }
        for (List<String> r : rows) {
            StringBuilder b = new StringBuilder(indent);
            int gap = 0;
            for (int i = 0; i < width.length; i++) {
                if (width[i] == 0) {
                    continue; // a column that no row fills takes no room
                }
                String cell = r.get(i);
                if (!cell.isEmpty()) {
                    b.append(" ".repeat(gap)).append(paint.of(i, cell, r));
                    gap = 0;
                }
                gap += width[i] - length(cell) + 2;
            }
            out.println(b);
        }
    }

    private void align(int column) {
        int before = 0;
        for (List<String> r : rows.subList(1, rows.size())) {
            before = Math.max(before, point(r.get(column)));
        }
        for (List<String> r : rows.subList(1, rows.size())) {
            String cell = r.get(column);
            if (!cell.isEmpty()) {
                r.set(column, " ".repeat(before - point(cell)) + cell);
            }
        }
    }

    /** How many characters stand before the decimal point, or where it would stand. */
    private static int point(String cell) {
        int i = 0;
        while (i < cell.length() && !Character.isDigit(cell.charAt(i))) {
            i++;
        }
        if (i == cell.length()) {
            return cell.isEmpty() ? 0 : 1; // a dash or a word, in the place of the last digit
        }
        while (i < cell.length() && Character.isDigit(cell.charAt(i))) {
            i++;
        }
        return i;
    }

    private static int length(String cell) {
        return cell.codePointCount(0, cell.length());
    }
}
