package steelyard.harness.record;

/**
 * One of the checks that a play makes of itself.
 *
 * @param check what was checked
 * @param text what was found, in words
 */
public record SelfCheck(String check, boolean ok, String text) {
    /** The check of every play that an interruption alone fails. */
    public static final String PLAYED_TO_ITS_END = "played to its end";
}
