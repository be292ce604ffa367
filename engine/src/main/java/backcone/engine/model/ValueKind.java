package backcone.engine.model;

/** What a declared name holds. */
public sealed interface ValueKind {
    record Quantity(QuantityKind kind) implements ValueKind {}

    record Choice(ChoiceKind kind) implements ValueKind {}

    /** A reference to a block of this kind (or one that is a special form of it). */
    record Reference(String kind) implements ValueKind {}

    /** Text on record, with or without a date. */
    record Text() implements ValueKind {}

    record Day() implements ValueKind {}

    /** A {@code let}: whatever its expression gives. */
    record Inferred() implements ValueKind {}

    /** The kind's name is not known; it absorbs, so one mistake gives one message. */
    record Unknown() implements ValueKind {}
}
