package steelyard.drills.read;

import java.util.Collection;
import java.util.List;
import java.util.Locale;
import org.jspecify.annotations.Nullable;

/** Finds the word that was probably meant: one that differs by few letters, or that begins so. */
public final class NearWord {
    private static final int LEAST_BEGINNING = 3;

    private NearWord() {}

    /** "did you mean 'weight'?", or what is given when no word is close. */
    public static String remedy(String written, Collection<String> known, String otherwise) {
        String near = nearest(written, known);
        return near == null ? otherwise : "did you mean '" + near + "'?";
    }

    /** The closest of the known words, or null when none is close: a third of the letters may differ, at most 3. */
    public static @Nullable String nearest(String written, Collection<String> known) {
        String word = plain(written);
        int most = Math.min(3, Math.max(1, word.length() / 3));
        String best = null;
        if (word.isEmpty() || word.length() > 60) {
            return null;
        }
        for (String candidate : known) {
            int distance = distance(word, plain(candidate), most + 1);
            if (distance <= most) {
                best = candidate;
                most = distance - 1;
            }
        }
        return best == null ? begunBy(word, known) : best;
    }

    /** The one known word that begins so; null when there is none, or several. */
    private static @Nullable String begunBy(String word, Collection<String> known) {
        List<String> found = known.stream()
                .filter(candidate -> plain(candidate).startsWith(word))
                .toList();
        return word.length() >= LEAST_BEGINNING && found.size() == 1 ? found.get(0) : null;
    }

    /** Case and the choice between dash, underscore and nothing are never what was meant to differ. */
    private static String plain(String word) {
        return word.toLowerCase(Locale.ROOT).replace("_", "").replace("-", "").replace(" ", "");
    }

    /** Letters to add, drop, replace or swap with a neighbour (optimal string alignment); from {@code cap} on just cap. */
    private static int distance(String a, String b, int cap) {
        if (Math.abs(a.length() - b.length()) >= cap) {
            return cap;
        }
        int[] before = new int[b.length() + 1];
        int[] last = new int[b.length() + 1];
        int[] row = new int[b.length() + 1];
        for (int j = 0; j <= b.length(); j++) {
            last[j] = j;
        }
        for (int i = 1; i <= a.length(); i++) {
            row[0] = i;
            for (int j = 1; j <= b.length(); j++) {
                int other = a.charAt(i - 1) == b.charAt(j - 1) ? 0 : 1;
                row[j] = Math.min(Math.min(row[j - 1], last[j]) + 1, last[j - 1] + other);
                if (i > 1 && j > 1 && a.charAt(i - 1) == b.charAt(j - 2) && a.charAt(i - 2) == b.charAt(j - 1)) {
                    row[j] = Math.min(row[j], before[j - 2] + 1);
                }
            }
            int[] spare = before;
            before = last;
            last = row;
            row = spare;
        }
        return Math.min(cap, last[b.length()]);
    }
}
