package backcone.engine.graph;

/** The operations of a tape. Booleans are 1 and 0; NaN marks a value that is open or at fault. */
public enum Op {
    CONST,
    /** A number of the drive's text: replaced without rebuilding the tape. */
    INPUT,
    /** The load factor, 1 unless a load reserve is searched. */
    LOAD,
    /** An input that is not given, or an expression that could not be understood. */
    OPEN,
    NEG,
    NOT,
    ABS,
    SIGN,
    SQRT,
    EXP,
    LN,
    LOG10,
    SIN,
    COS,
    TAN,
    ASIN,
    ACOS,
    ATAN,
    FLOOR,
    CEIL,
    ROUND,
    ADD,
    SUB,
    MUL,
    DIV,
    POW,
    ATAN2,
    MIN,
    MAX,
    COMMON_DIVISOR,
    LT,
    LE,
    GT,
    GE,
    EQ,
    NE,
    AND,
    OR,
    /** a ? b : c. */
    SELECT,
    /** b-th table at key a. */
    TABLE,
    NEAREST_KEY,
    NEXT_KEY,
    LISTED_KEY,
    /** The unknown of a root: bracket a..b; its region ends at the matching END. */
    ROOT,
    /** The unknown of an iteration: start a, tolerance b. */
    SETTLE,
    /** Closes the region of the unknown a with the residual (or the new value) b. */
    END
}
