package backcone.engine.fixes;

import backcone.engine.answers.DriveAnswer;
import backcone.engine.answers.RequirementAnswer;
import backcone.engine.answers.State;
import backcone.engine.diagnostics.Code;
import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.diagnostics.Severity;
import java.util.ArrayList;
import java.util.Collection;
import java.util.HashMap;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;

/** What a text or a run says: its requirements and what else is wrong. Two of them can be held against each other. */
final class Verdict {
    /** {@code drive id}. */
    final Map<String, RequirementAnswer> requirements = new LinkedHashMap<>();

    private final Map<String, Integer> troubles = new HashMap<>();
    private final Map<String, Integer> hints = new HashMap<>();

    static Verdict of(Collection<DriveAnswer> drives, Collection<Diagnostic> findings) {
        Verdict v = new Verdict();
        for (DriveAnswer d : drives) {
            v.add(d);
        }
        findings.forEach(f -> v.add("", f));
        return v;
    }

    void add(DriveAnswer d) {
        for (RequirementAnswer r : d.requirements()) {
            requirements.put(id(d.name(), r.id()), r);
        }
    }

    static String id(String drive, String requirement) {
        return drive + " " + requirement;
    }

    void add(String drive, Diagnostic f) {
        if (f.code() == Code.CUSTOM_HINT) {
            hints.merge(key(drive, f), 1, Integer::sum);
        } else if ((f.severity() == Severity.ERROR || f.severity() == Severity.WARNING) && !says(f.code())) {
            troubles.merge(key(drive, f), 1, Integer::sum);
        }
    }

    /** Findings that only repeat the state of a requirement or of a deviation. */
    private static boolean says(Code code) {
        switch (code) {
            case SHORT:
            case OUTSIDE:
            case ASSERT_FAILED:
            case ACCEPTANCE_EXPIRED:
            case ACCEPTANCE_SOON:
            case ACCEPTANCE_NOT_NEEDED:
            case WAIVER_EXPIRED:
                return true;
            default:
                return false;
        }
    }

    /** The same for the same finding when its numbers have changed. */
    static String key(String drive, Diagnostic f) {
        String m = f.message();
        if (m.startsWith("In `")) {
            int end = m.indexOf("`: ", 4);
            if (end > 0) {
                return key(
                        m.substring(4, end),
                        new Diagnostic(
                                f.code(),
                                f.severity(),
                                f.file(),
                                f.span(),
                                m.substring(end + 3),
                                f.related(),
                                List.of()));
            }
        }
        int open = m.indexOf('`');
        int close = open < 0 ? -1 : m.indexOf('`', open + 1);
        String about = close < 0 ? "" : m.substring(open, close);
        String by = f.related().isEmpty() ? "" : f.related().get(0).message();
        return drive + "|" + f.code().id() + "|" + about + "|" + by;
    }

    boolean has(String key) {
        return troubles.containsKey(key) || hints.containsKey(key);
    }

    /** Whether nothing that was right before has become wrong. */
    boolean notWorseThan(Verdict before) {
        for (Map.Entry<String, RequirementAnswer> e : requirements.entrySet()) {
            RequirementAnswer was = before.requirements.get(e.getKey());
            State now = e.getValue().state();
            if (was == null || !now.isMet() && (was.state().isMet() || now != was.state() && now != State.SHORT)) {
                return false;
            }
        }
        for (Map.Entry<String, Integer> e : troubles.entrySet()) {
            if (e.getValue() > before.troubles.getOrDefault(e.getKey(), 0)) {
                return false;
            }
        }
        return true;
    }

    int newHints(Verdict before) {
        int n = 0;
        for (Map.Entry<String, Integer> e : hints.entrySet()) {
            n += Math.max(0, e.getValue() - before.hints.getOrDefault(e.getKey(), 0));
        }
        return n;
    }

    List<String> in(State... states) {
        List<String> out = new ArrayList<>();
        requirements.forEach((k, r) -> {
            for (State s : states) {
                if (r.state() == s) {
                    out.add(k);
                }
            }
        });
        return out;
    }

    /** Those that are neither met nor open. */
    List<String> failing() {
        return in(State.SHORT, State.OUTSIDE);
    }
}
