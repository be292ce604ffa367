package backcone.engine.review;

import java.io.IOException;
import java.io.InputStream;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;

/** The names that reviewers look at, from {@code review.txt}. */
final class ReviewWords {
    enum Way {
        DOWN,
        UP,
        CHANGE
    }

    /** A value of each block of {@code kind}, or of each rating by the method {@code kind}. */
    record Named(String kind, String name) {}

    private static final ReviewWords STANDARD = read();

    final List<Named> facts = new ArrayList<>();
    final List<Named> allowables = new ArrayList<>();
    private final Map<String, Way> bars = new HashMap<>();

    private final Map<String, String> us = new HashMap<>();

    private ReviewWords() {}

    static ReviewWords standard() {
        return STANDARD;
    }

    @Nullable
    Way bar(String name) {
        return bars.get(name);
    }

    /** The US customary unit for a shown one; the same where there is no other. */
    String us(String unit) {
        return us.getOrDefault(unit, unit);
    }

    private static ReviewWords read() {
        ReviewWords w = new ReviewWords();
        String text;
        try (InputStream in = ReviewWords.class.getResourceAsStream("review.txt")) {
            if (in == null) {
                throw new IllegalStateException("review.txt is missing from the program");
            }
            text = new String(in.readAllBytes(), StandardCharsets.UTF_8);
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
        text.lines()
                .map(String::strip)
                .filter(l -> !l.isEmpty() && l.charAt(0) != '#')
                .forEach(l -> {
                    String[] word = l.split(" +", -1);
                    switch (word[0]) {
                        case "fact" -> w.facts.add(new Named(word[1], word[2]));
                        case "allowable" -> w.allowables.add(new Named(word[1], word[2]));
                        case "bar" -> w.bars.put(word[1], Way.valueOf(word[2].toUpperCase(java.util.Locale.ROOT)));
                        case "us" -> w.us.put(word[1], word[2]);
                        default -> throw new IllegalStateException("review.txt: " + l);
                    }
                });
        return w;
    }
}
