package steelyard.drills.read;

import java.util.List;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import steelyard.drills.model.Traffic;

/** Paths of requests, and what may stand in for something in them. */
final class Paths {
    private static final Pattern STAND_IN = Pattern.compile("\\{([A-Za-z-]*)}");

    static final Quantity<String> PATH = Quantity.of("a path", "/sailings/today", text -> text)
            .that(Paths::fitsRequestLine, "is not a path", "begin with a slash, and write no space");

    private Paths() {}

    /** Notes what stands in braces and stands for nothing. */
    static void checkStandIns(String text, Place place, Problems problems) {
        Matcher found = STAND_IN.matcher(text);
        while (found.find()) {
            if (!found.group().equals(Traffic.Request.CLIENT)) {
                problems.add(
                        place,
                        Quantity.quoted(found.group()) + " stands for nothing",
                        NearWord.remedy(
                                found.group(),
                                List.of(Traffic.Request.CLIENT),
                                "write {client} for the number of the client"));
            }
        }
    }

    /** Whether a target is this path, with whatever query where the path names none. */
    static boolean asksFor(String target, String path) {
        return target.equals(path) || (path.indexOf('?') < 0 && target.startsWith(path + "?"));
    }

    /** Whether a text can stand in a request line as it is: printable ASCII that begins with a slash. */
    private static boolean fitsRequestLine(String path) {
        return path.startsWith("/") && path.chars().allMatch(c -> c > ' ' && c < 0x7f && c != '#');
    }
}
