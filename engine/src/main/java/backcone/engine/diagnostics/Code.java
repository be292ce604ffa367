package backcone.engine.diagnostics;

/**
 * The registry of diagnostic codes. A code is for ever: retire it, never reuse it. Each has a page
 * {@code diagnostics/CODE.md} in the resources with a wrong and a right text, both run by a test.
 *
 * <p>1xxx what the text says (syntax); 2xxx names and places; 3xxx quantities and units; 4xxx values, relations and
 * faults; 5xxx requirements, limits and deviations; 6xxx handbook texts; 7xxx files.
 */
public enum Code {
    // 1xxx syntax
    SYNTAX(1001, Severity.ERROR, "text that cannot be read here"),
    MISSING_VALUE(1002, Severity.ERROR, "a value is missing"),
    UNCLOSED_BLOCK(1003, Severity.ERROR, "a brace is not closed"),
    STRAY_BRACE(1004, Severity.ERROR, "a closing brace without its opening"),
    UNCLOSED_STRING(1005, Severity.ERROR, "a string without its end quote"),
    BAD_NUMBER(1006, Severity.ERROR, "a number that cannot be read"),
    DECIMAL_COMMA(1007, Severity.ERROR, "a comma in a number"),
    BAD_CHARACTER(1008, Severity.ERROR, "a character that has no meaning here"),
    TOO_DEEP(1009, Severity.ERROR, "blocks or brackets nested too deep"),
    TOO_LONG(1010, Severity.ERROR, "a text too long to read"),
    BAD_DATE(1011, Severity.ERROR, "a date that does not exist"),
    MISSING_OPERATOR(1012, Severity.ERROR, "a multiplication sign is missing"),
    // 2xxx names
    UNKNOWN_NAME(2001, Severity.ERROR, "a name that nothing declares"),
    UNKNOWN_PROPERTY(2002, Severity.ERROR, "a property that this block does not have"),
    UNKNOWN_KIND(2003, Severity.ERROR, "a block or quantity kind that does not exist"),
    UNKNOWN_METHOD(2004, Severity.ERROR, "a method that is not in this handbook"),
    UNKNOWN_CHOICE(2005, Severity.ERROR, "a word that is not one of the choices"),
    UNKNOWN_CHECK(2006, Severity.ERROR, "a check that this method does not have"),
    DUPLICATE_NAME(2007, Severity.ERROR, "a name given twice"),
    WRONG_PLACE(2008, Severity.ERROR, "an entry that does not belong here"),
    AMBIGUOUS_NAME(2009, Severity.ERROR, "a name that could mean two things"),
    NOT_A_BLOCK(2010, Severity.ERROR, "a reference to something of another kind"),
    UNKNOWN_EDITION(2011, Severity.ERROR, "an edition that the method does not have"),
    MISSING_EDITION(2012, Severity.ERROR, "the edition of the method is not written"),
    UNKNOWN_READING(2013, Severity.ERROR, "a reading that the equation does not have"),
    UNUSED_NAME(2014, Severity.HINT, "a name that nothing uses"),
    HIDDEN_NAME(2015, Severity.ERROR, "a name declared again further in"),
    METHOD_NOT_HERE(2016, Severity.INFORMATION, "a rating method that this handbook does not hold yet"),
    // 3xxx quantities
    MISSING_UNIT(3001, Severity.ERROR, "a quantity without its unit"),
    UNKNOWN_UNIT(3002, Severity.ERROR, "a unit that does not exist"),
    WRONG_UNIT(3003, Severity.ERROR, "a unit of another dimension"),
    WRONG_KIND(3004, Severity.ERROR, "a unit of the right dimension but another kind"),
    DIMENSION_MISMATCH(3005, Severity.ERROR, "an expression whose dimensions do not fit"),
    NOT_WHOLE(3006, Severity.ERROR, "a count that is not whole"),
    OUT_OF_RANGE(3007, Severity.ERROR, "a value outside its declared range"),
    WRONG_FORM(3008, Severity.ERROR, "a value form that this property does not take"),
    // 4xxx values
    MISSING_INPUT(4001, Severity.INFORMATION, "an input that is not given"),
    COMPUTED_GIVEN(4002, Severity.ERROR, "a value given for something computed"),
    DISAGREE(4003, Severity.ERROR, "given values that contradict each other"),
    CYCLE(4004, Severity.ERROR, "values that depend on themselves"),
    FAULT(4005, Severity.ERROR, "a value that cannot be computed"),
    NO_ROOT(4006, Severity.ERROR, "an equation without a solution in its bracket"),
    BEYOND_TABLE(4007, Severity.ERROR, "a key beyond its table"),
    NEEDS_REASON(4008, Severity.ERROR, "an assumption, override or deviation without its reason"),
    SUM_OF_SHARES(4009, Severity.ERROR, "shares that do not add up to one"),
    SPLIT_TRAIN(4010, Severity.ERROR, "a train of shafts that is no tree"),
    // 5xxx requirements
    SHORT(5001, Severity.ERROR, "a requirement that is not met"),
    OUTSIDE(5002, Severity.ERROR, "a result outside the validity of its method"),
    TIGHT(5004, Severity.HINT, "a requirement met with little margin"),
    ACCEPTED(5005, Severity.HINT, "a shortfall accepted until a date"),
    ACCEPTANCE_EXPIRED(5006, Severity.ERROR, "an acceptance past its date"),
    ACCEPTANCE_SOON(5007, Severity.WARNING, "an acceptance that expires within 30 days"),
    ACCEPTANCE_NOT_NEEDED(5008, Severity.WARNING, "an acceptance that is no longer needed"),
    ASSERT_FAILED(5009, Severity.ERROR, "a stated fact that has drifted"),
    LIMIT_PASSED(5010, Severity.WARNING, "a limit of good practice or validity that is passed"),
    IMPOSSIBLE(5011, Severity.ERROR, "geometry that cannot be made"),
    DUPLICATE_REQUIREMENT(5012, Severity.ERROR, "the same check required twice"),
    WAIVER_EXPIRED(5013, Severity.ERROR, "a waiver past its date"),
    CUSTOM_HINT(5014, Severity.HINT, "a customary rule not followed"),
    NOT_APPLICABLE(5015, Severity.INFORMATION, "a method that does not cover this pair"),
    UNKNOWN_REQUIREMENT(5016, Severity.ERROR, "a deviation for something that is not required"),
    // 6xxx handbook
    NO_SOURCE(6001, Severity.WARNING, "an equation without its source"),
    EXAMPLE_FAILED(6002, Severity.ERROR, "a worked example that is not met"),
    NOT_SOLVABLE(6003, Severity.ERROR, "a relation that cannot be solved for a name"),
    BAD_TABLE(6004, Severity.ERROR, "a table that cannot be read"),
    INCOMPLETE_CHOICE(6005, Severity.ERROR, "a choice that leaves out a word"),
    // 7xxx files
    FILE_NOT_FOUND(7001, Severity.ERROR, "a file that is not there"),
    FILE_OUTSIDE(7002, Severity.ERROR, "a file outside the opened folder"),
    USE_CYCLE(7003, Severity.ERROR, "files that use each other"),
    FILE_UNREADABLE(7004, Severity.ERROR, "a file that cannot be read"),
    TOO_MANY(7005, Severity.WARNING, "more findings than are shown"),
    INTERNAL(7099, Severity.ERROR, "a fault of the program");

    private final int number;
    private final Severity severity;
    private final String title;

    Code(int number, Severity severity, String title) {
        this.number = number;
        this.severity = severity;
        this.title = title;
    }

    /** As written in every output: {@code BC2001}. */
    public String id() {
        return "BC" + number;
    }

    public Severity severity() {
        return severity;
    }

    public String title() {
        return title;
    }
}
