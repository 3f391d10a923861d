package steelyard.harness.tune;

import java.util.ArrayList;
import java.util.List;

/** Which cells no other beats: better on one of the two measures and at least as good on the other. */
public final class Front {

    /** What is to be said of a cell beside the others. */
    public enum Mark {
        /** No other cell beats it (Pareto). */
        NON_DOMINATED("non-dominated"),
        /** Others beat it, but by no more than chance explains. */
        BY_CHANCE("beaten within chance"),
        /** Another cell beats it. */
        DOMINATED("");

        private final String word;

        Mark(String word) {
            this.word = word;
        }

        /** As it is written in a table; empty for what needs no mark. */
        public String word() {
            return word;
        }
    }

    private Front() {}

    /** A mark for each of the results, in their order. */
    public static List<Mark> marks(List<Result> results) {
        List<Mark> marks = new ArrayList<>();
        for (Result each : results) {
            marks.add(mark(each, results));
        }
        return marks;
    }

    private static Mark mark(Result result, List<Result> results) {
        Mark mark = Mark.NON_DOMINATED;
        for (Result other : results) {
            if (beats(other, result)) {
                if (clearly(other, result)) {
                    return Mark.DOMINATED;
                }
                mark = Mark.BY_CHANCE;
            }
        }
        return mark;
    }

    static boolean beats(Result one, Result other) {
        int want = one.want().compareTo(other.want());
        int against = one.against().compareTo(other.against());
        return want <= 0 && against <= 0 && want + against < 0;
    }

    private static boolean clearly(Result one, Result other) {
        boolean want = one.want().compareTo(other.want()) < 0 && one.want().tellsFrom(other.want());
        return want
                || (one.against().compareTo(other.against()) < 0
                        && one.against().tellsFrom(other.against()));
    }

    /** Whether chance explains how far two cells lie apart on both measures. */
    static boolean alike(Result one, Result other) {
        return !one.want().tellsFrom(other.want()) && !one.against().tellsFrom(other.against());
    }
}
