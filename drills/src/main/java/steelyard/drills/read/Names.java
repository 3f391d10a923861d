package steelyard.drills.read;

/** Names of hosts, zones, pools and backends: they reach header fields, file columns and addresses as they stand. */
final class Names {
    static final String RULE =
            "use letters a to z, digits, dashes, underscores or points, a letter or digit first, 60 at most";

    static final String GAUGE_RULE = "use letters, digits, dashes, underscores or points, a letter first, 60 at most";

    static final Quantity<String> NAME = name("a name", "north-quay");

    /** A title. */
    static final Quantity<String> TITLE = some("a title", "Lose one of three");

    /** What a person should know and look for. */
    static final Quantity<String> ABOUT = some("a text", "what happens, and what to look for");

    /** A folder. */
    static final Quantity<String> FOLDER = some("a folder", "answers");

    /** A file. */
    static final Quantity<String> FILE = some("a file", "times.csv");

    /** A name of a field of a head or of a cookie: a token of RFC 9110 section 5.6.2. */
    static final Quantity<String> TOKEN = Quantity.of("a name", "x-berth", text -> text)
            .that(Names::isToken, "cannot be such a name", "use letters, digits and dashes, 60 at most");

    /** A gauge of a load page. */
    static final Quantity<String> GAUGE = Quantity.of("the name of a gauge", "memory", text -> text)
            .that(Names::fitsGauge, "cannot name a gauge", GAUGE_RULE);

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

    static boolean fitsGauge(String name) {
        return fits(name) && !(name.charAt(0) >= '0' && name.charAt(0) <= '9');
    }

    static boolean isToken(String name) {
        return !name.isEmpty()
                && name.length() <= 60
                && name.chars().allMatch(c -> letterOrDigit((char) c) || "!#$%&'*+-.^_`|~".indexOf(c) >= 0);
    }

    private static boolean letterOrDigit(char c) {
        return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z') || (c >= '0' && c <= '9');
    }
}
