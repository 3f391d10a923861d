package steelyard.drills.read;

/** Names of hosts, zones, pools and backends: they reach header fields, file columns and addresses as they stand. */
final class Names {
    static final String RULE =
            "use letters a to z, digits, dashes, underscores or points, a letter or digit first, 60 at most";

    static final Quantity<String> NAME = name("a name", "north-quay");

    /** A title. */
    static final Quantity<String> TITLE = some("a title", "Lose one of three");

    /** What a person should know and look for. */
    static final Quantity<String> ABOUT = some("a text", "what happens, and what to look for");

    /** A folder. */
    static final Quantity<String> FOLDER = some("a folder", "answers");

    private Names() {}

    /** Any text but an empty one. */
    static Quantity<String> some(String noun, String example) {
        return Quantity.of(noun, example, text -> text.isEmpty() ? null : text);
    }

    static Quantity<String> name(String noun, String example) {
        return Quantity.of(noun, example, text -> text).that(Names::fits, "cannot be a name", RULE);
    }

    static boolean fits(String name) {
        boolean fits = !name.isEmpty() && name.length() <= 60 && letterOrDigit(name.charAt(0));
        for (int i = 0; fits && i < name.length(); i++) {
            char c = name.charAt(i);
            fits = letterOrDigit(c) || c == '-' || c == '_' || c == '.';
        }
        return fits;
    }

    private static boolean letterOrDigit(char c) {
        return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z') || (c >= '0' && c <= '9');
    }
}
