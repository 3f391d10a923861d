package steelyard.harness.compare;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.function.DoubleUnaryOperator;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Measure;
import steelyard.harness.compare.Difference.Method;
import steelyard.harness.forecast.PlayTable;
import steelyard.harness.forecast.Spread;

/** What two samples of one measure say about the difference of the sides they are of. */
final class Contrast {
    private static final String ONE_EACH = "one run each: cannot be told from that";
    /** From so many plays a 95 % band is more than the least and the most of them. */
    private static final int LEAST_PLAYS = 40;

    private final Runs first;
    private final Runs second;
    private final double margin;
    private final double errorRate;
    private final @Nullable List<int[]> pairs;

    Contrast(Runs first, Runs second, double margin, double errorRate) {
        this.first = first;
        this.second = second;
        this.margin = margin;
        this.errorRate = errorRate;
        pairs = first.plays() == null || second.plays() == null ? null : common(first.plays(), second.plays());
    }

    /** Plays of one seed, as their numbers on both sides. */
    private static List<int[]> common(PlayTable first, PlayTable second) {
        Map<Long, Integer> places = new HashMap<>();
        for (int at = 0; at < second.rows().size(); at++) {
            places.put(second.rows().get(at).seed(), at);
        }
        List<int[]> common = new ArrayList<>();
        for (int at = 0; at < first.rows().size(); at++) {
            Integer other = places.get(first.rows().get(at).seed());
            if (other != null) {
                common.add(new int[] {at, other});
            }
        }
        return common;
    }

    Line line(Sample one, Sample two) {
        Direction direction = direction(one);
        if (one.undefined() != two.undefined()) {
            return gaps(one, two);
        }
        if (one.known().length == 0) {
            return line(
                    one,
                    two,
                    null,
                    Word.NO_CLEAR_CHANGE,
                    "neither has a value: " + one.row().measured());
        }
        Optional<Difference> shown = difference(one, two, value -> value);
        if (shown.isEmpty()) {
            return line(one, two, null, Word.CANNOT_BE_TOLD, why(one, two));
        }
        // Distances from a middle are compared where a middle is best; elsewhere the two are the same but for the sign.
        Difference judged = direction.side() == Direction.Side.MIDDLE
                ? difference(one, two, direction::cost).orElseThrow()
                : shown.get();
        return judge(one, two, shown.get(), judged, direction);
    }

    /** Why there is no difference to give, and what to do. */
    private String why(Sample one, Sample two) {
        if (one.values().length == 1 && two.values().length == 1) {
            return ONE_EACH;
        }
        if (first.forecast() && second.forecast()) {
            return "too few plays with a value: forecast more of them";
        }
        if (!first.forecast() && !second.forecast()) {
            return "one rehearsal beside several: rehearse it twice at least";
        }
        Sample forecast = first.forecast() ? one : two;
        return "one rehearsal beside a forecast of " + forecast.values().length + " plays, " + forecast.known().length
                + " with a value: forecast " + LEAST_PLAYS + " at least";
    }

    /** A backend that does more of the work is no worse for it, unless its drill bounds that. */
    private static Direction direction(Sample sample) {
        boolean load = !sample.expected() && sample.measure() == Measure.PEAK_UTILISATION;
        return load ? Direction.NONE : sample.direction();
    }

    private Line judge(Sample one, Sample two, Difference shown, Difference judged, Direction direction) {
        boolean large = Math.abs(judged.size()) > margin * Math.abs(one.mean());
        if (!judged.beyondChance() || !large) {
            String note = judged.beyondChance() ? "beyond chance, but within the margin" : caution(shown);
            return line(one, two, shown, Word.NO_CLEAR_CHANGE, note);
        }
        boolean worse = direction.side() == Direction.Side.MORE ? judged.size() < 0 : judged.size() > 0;
        Word word = direction.side() == Direction.Side.NONE ? Word.CHANGED : worse ? Word.WORSE : Word.BETTER;
        return line(one, two, shown, word, caution(shown));
    }

    private static @Nullable String caution(Difference shown) {
        return shown.method() == Method.NEWCOMBE
                ? "from the counts of one run each, as if each request went its own way; those that fail together say less"
                : null;
    }

    private static Line line(Sample one, Sample two, @Nullable Difference shown, Word word, @Nullable String note) {
        return new Line(one.row().text(), one.expected(), one.row().unit(), one.mean(), two.mean(), shown, word, note);
    }

    /** More plays without a value are worse, whatever the values of the others. */
    private Line gaps(Sample one, Sample two) {
        String note = "without a value in " + one.undefined() + " of " + one.values().length + ", then in "
                + two.undefined() + " of " + two.values().length;
        Difference shares = Difference.shares(
                one.undefined(), one.values().length, two.undefined(), two.values().length, errorRate);
        if (one.values().length == 1 || two.values().length == 1) {
            return line(one, two, null, Word.CANNOT_BE_TOLD, note);
        }
        Word word = !shares.beyondChance() ? Word.NO_CLEAR_CHANGE : shares.size() > 0 ? Word.WORSE : Word.BETTER;
        return line(one, two, null, word, note);
    }

    private Optional<Difference> difference(Sample one, Sample two, DoubleUnaryOperator cost) {
        if (pairs != null && pairs.size() > 1) {
            return paired(one, two, cost);
        }
        double[] before = Arrays.stream(one.known()).map(cost).toArray();
        double[] after = Arrays.stream(two.known()).map(cost).toArray();
        if (before.length > 1 && after.length > 1) {
            return Optional.of(Difference.welch(before, after, errorRate));
        }
        if (before.length == 1 && after.length == 1) {
            return counted(one, two);
        }
        return banded(before, after);
    }

    private Optional<Difference> paired(Sample one, Sample two, DoubleUnaryOperator cost) {
        List<int[]> known = pairs == null
                ? List.of()
                : pairs.stream()
                        .filter(each -> !Double.isNaN(one.values()[each[0]]) && !Double.isNaN(two.values()[each[1]]))
                        .toList();
        if (known.size() < 2) {
            return Optional.empty();
        }
        double[] before = known.stream()
                .mapToDouble(each -> cost.applyAsDouble(one.values()[each[0]]))
                .toArray();
        double[] after = known.stream()
                .mapToDouble(each -> cost.applyAsDouble(two.values()[each[1]]))
                .toArray();
        return Optional.of(Difference.paired(before, after, errorRate));
    }

    /** Two single runs: shares out of counts. */
    private Optional<Difference> counted(Sample one, Sample two) {
        if (first.forecast() || second.forecast() || one.values().length != 1 || two.values().length != 1) {
            return Optional.empty();
        }
        Optional<Counts> before = Counts.of(first.first(), one.row());
        Optional<Counts> after = Counts.of(second.first(), two.row());
        return before.isEmpty() || after.isEmpty()
                ? Optional.empty()
                : Optional.of(Difference.shares(
                        before.get().hits(),
                        before.get().of(),
                        after.get().hits(),
                        after.get().of(),
                        errorRate));
    }

    /** A single run beside a forecast. */
    private Optional<Difference> banded(double[] before, double[] after) {
        if (second.forecast() && after.length >= LEAST_PLAYS) {
            Spread spread = Spread.of(after);
            double value = before[0];
            return Optional.of(new Difference(
                    spread.median() - value, spread.low95() - value, spread.high95() - value, Method.BAND));
        }
        if (first.forecast() && before.length >= LEAST_PLAYS) {
            Spread spread = Spread.of(before);
            double value = after[0];
            return Optional.of(new Difference(
                    value - spread.median(), value - spread.high95(), value - spread.low95(), Method.BAND));
        }
        return Optional.empty();
    }
}
