package steelyard.harness.compare;

/** What is to be said of a measure, plainly. */
public enum Word {
    BETTER("better"),
    WORSE("worse"),
    /** It differs beyond margin and chance, and no side of it is the better one. */
    CHANGED("changed"),
    NO_CLEAR_CHANGE("no clear change"),
    CANNOT_BE_TOLD("cannot be told");

    private final String text;

    Word(String text) {
        this.text = text;
    }

    public String text() {
        return text;
    }
}
