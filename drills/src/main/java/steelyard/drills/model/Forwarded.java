package steelyard.drills.model;

/** Whether requests get the Forwarded field (RFC 7239). */
public enum Forwarded implements Worded {
    ADDED("true"),
    NOT_ADDED("false"),
    /** With identifiers that are made up (section 6.3), so that it gives no address away. */
    HIDDEN("hidden");

    private final String word;

    Forwarded(String word) {
        this.word = word;
    }

    @Override
    public String word() {
        return word;
    }
}
