package backcone.cli;

/** What every summary carries. */
final class Caution {
    static final String TEXT =
            "These figures support a qualified engineer's judgement and do not replace it; local codes, the machine's safety"
                    + " standards and the bought standard prevail.";

    private Caution() {}
}
