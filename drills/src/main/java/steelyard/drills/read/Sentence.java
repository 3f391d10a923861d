package steelyard.drills.read;

import java.util.Collection;
import java.util.Iterator;

/** Lists as a sentence holds them. */
final class Sentence {
    private Sentence() {}

    /** {@code a, b or c}. */
    static String or(Collection<String> words) {
        return joined(words, " or ");
    }

    /** {@code a, b and c}. */
    static String and(Collection<String> words) {
        return joined(words, " and ");
    }

    private static String joined(Collection<String> words, String lastly) {
        StringBuilder text = new StringBuilder();
        Iterator<String> rest = words.iterator();
        while (rest.hasNext()) {
            String word = rest.next();
            text.append(text.length() == 0 ? "" : rest.hasNext() ? ", " : lastly)
                    .append(word);
        }
        return text.toString();
    }
}
