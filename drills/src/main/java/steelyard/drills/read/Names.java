package steelyard.drills.read;

/** Names of hosts, zones, pools and backends: they reach header fields, file columns and addresses as they stand. */
final class Names {
    static final String RULE =
            "use letters a to z, digits, dashes, underscores or points, a letter or digit first, 60 at most";

    static final Quantity<String> NAME =
            Quantity.of("a name", "fulmar", text -> text).that(Names::fits, "cannot be a name", RULE);

    /** A title or a sentence. */
    static final Quantity<String> TEXT =
            Quantity.of("a text", "Lose one of three", text -> text.isEmpty() ? null : text);

    private Names() {}

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
