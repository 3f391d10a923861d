package steelyard.harness.compare;

/** Two runs that cannot be put side by side. The message is one line: which folder, what is wrong, what to do. */
public final class CannotCompare extends Exception {
    private static final long serialVersionUID = 1L;

    private final boolean misnamed;

    private CannotCompare(String message, boolean misnamed) {
        super(message);
        this.misnamed = misnamed;
    }

    /** What was named is no run. */
    static CannotCompare misnamed(String message) {
        return new CannotCompare(message, true);
    }

    /** There is a run, but nothing can be told from it. */
    static CannotCompare unusable(String message) {
        return new CannotCompare(message, false);
    }

    /** Whether something else should have been named, instead of the run being of no use. */
    public boolean isMisnamed() {
        return misnamed;
    }
}
