package backcone.cli;

import java.time.DateTimeException;
import java.time.LocalDate;
import java.time.ZoneId;
import org.jspecify.annotations.Nullable;

/** The day on which a command runs. The launcher tells it, since Java's own calendar costs a good part of a short run. */
final class Today {
    private Today() {}

    static LocalDate day() {
        LocalDate told = read(System.getProperty("backcone.today"));
        return told != null ? told : LocalDate.now(ZoneId.systemDefault());
    }

    /** Of {@code 2027-06-30}; null for anything else. */
    static @Nullable LocalDate read(@Nullable String text) {
        if (text == null || text.length() != 10 || text.charAt(4) != '-' || text.charAt(7) != '-') {
            return null;
        }
        try {
            return LocalDate.of(
                    Integer.parseInt(text.substring(0, 4)),
                    Integer.parseInt(text.substring(5, 7)),
                    Integer.parseInt(text.substring(8)));
        } catch (NumberFormatException | DateTimeException e) {
            return null;
        }
    }
}
