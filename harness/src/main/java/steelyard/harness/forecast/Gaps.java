package steelyard.harness.forecast;

import java.util.Comparator;
import java.util.List;
import java.util.Map;
import java.util.TreeMap;
import java.util.stream.Collectors;
import org.jspecify.annotations.Nullable;
import steelyard.harness.record.Wording;

/**
 * Plays in which a figure has no value.
 *
 * @param plays of how many plays
 * @param reasons the most frequent first
 */
public record Gaps(int plays, List<Reason> reasons) {
    public Gaps {
        reasons = List.copyOf(reasons);
    }

    /**
     * One reason.
     *
     * @param word {@code never}, {@code not measured}, {@code infinite}
     * @param why of the first of the plays, or null
     */
    public record Reason(String word, int plays, @Nullable String why) {
        private Reason with(Reason later) {
            return new Reason(word, plays + later.plays, why);
        }
    }

    static Gaps of(Played played, int figure) {
        Map<String, Reason> reasons = new TreeMap<>();
        for (Play play : played.plays()) {
            Play.Gap gap = play.gap(figure);
            if (gap != null) {
                reasons.merge(gap.word(), new Reason(gap.word(), 1, gap.why()), Reason::with);
            }
        }
        List<Reason> frequent = reasons.values().stream()
                .sorted(Comparator.comparingInt(Reason::plays).reversed())
                .toList();
        return new Gaps(played.plays().size(), frequent);
    }

    /** The word that most of them have; {@code not measured} without any. */
    String commonest() {
        return reasons.isEmpty() ? "not measured" : reasons.get(0).word();
    }

    /** All of them in words, or null when there are none. */
    @Nullable
    String text() {
        if (reasons.isEmpty()) {
            return null;
        }
        return reasons.stream().map(this::text).collect(Collectors.joining("; "));
    }

    private String text(Reason reason) {
        return reason.word() + " in " + reason.plays() + " of " + Wording.count(plays, "play", "plays")
                + (reason.why() == null ? "" : " (" + reason.why() + ")");
    }
}
