package steelyard.harness.judge;

import java.util.Comparator;
import java.util.List;
import steelyard.drills.model.Expectation;
import steelyard.drills.model.Expectation.Bound;
import steelyard.drills.model.Measure.Unit;
import steelyard.harness.record.Finding;
import steelyard.harness.record.SelfCheck;
import steelyard.harness.record.Wording;

/** From readings to findings, and from findings to one sentence. */
final class Findings {
    private Findings() {}

    /** @param expected whether the expectation's bound counts; that of a standard measure does not */
    static Finding of(Expectation expectation, boolean expected, Reading reading, long lastsNanos) {
        Bound bound = expected ? expectation.bound() : null;
        return new Finding(
                expectation.measure(),
                ExpectationWords.of(expectation),
                ExpectationWords.text(expectation, lastsNanos),
                bound,
                reading.word() != null ? reading.word() : words(expectation, reading.value()),
                reading.value(),
                reading.note());
    }

    /**
     * What is found in a play that was interrupted: known only where its window was over, or what was waited for had come.
     *
     * @param playedNanos when it was interrupted
     */
    static Finding cutShort(Expectation expectation, Reading reading, long lastsNanos, long playedNanos) {
        Finding whole = of(expectation, true, reading, lastsNanos);
        boolean windowed = expectation.after() == null;
        if (windowed ? expectation.toNanos() <= playedNanos : reading.hasValue()) {
            return whole;
        }
        boolean begun = windowed && expectation.fromNanos() < playedNanos && reading.hasValue();
        return new Finding(
                whole.measure(),
                whole.of(),
                whole.text(),
                whole.bound(),
                begun ? whole.measured() : "not measured",
                begun ? whole.value() : Double.NaN,
                null,
                false);
    }

    /** The sentence about a play that was interrupted. */
    static String interrupted(long playedNanos) {
        return "Interrupted at " + instant(playedNanos) + ": not judged; what was measured up to then stands below.";
    }

    /** To a tenth of a second. */
    static String instant(long nanos) {
        return Wording.duration(StrictMath.round(nanos / 1e8) * 100_000_000L);
    }

    /** One sentence: the reason why the play is unfit, else the expectation that was missed or held by least. */
    static String sentence(List<Finding> found, List<SelfCheck> checks) {
        for (SelfCheck check : checks) {
            if (!check.ok()) {
                return "Unfit to judge: " + check.check() + ": " + check.text() + ".";
            }
        }
        if (found.isEmpty()) {
            return "Met: nothing was expected.";
        }
        List<Finding> missed = found.stream().filter(each -> !each.met()).toList();
        Finding decided = (missed.isEmpty() ? found : missed)
                .stream().min(Comparator.comparingDouble(Findings::slack)).orElseThrow();
        return missed.isEmpty()
                ? "Met: " + all(found.size()) + "; tightest: " + words(decided) + "."
                : "Not met: " + missed.size() + " of " + Wording.count(found.size(), "expectation", "expectations")
                        + " missed; worst: " + words(decided) + ".";
    }

    private static String all(int count) {
        return count == 1 ? "the one expectation held" : "all " + count + " expectations held";
    }

    private static String words(Finding finding) {
        String note = finding.note() == null || finding.met() ? "" : " (" + finding.note() + ")";
        return finding.text() + ": " + finding.measured() + note + ", bound " + finding.boundText();
    }

    /** A value beside a bound never reads like one that holds when it does not: then it is written in full. */
    private static String words(Expectation expectation, double value) {
        Unit unit = expectation.measure().unit();
        Bound bound = expectation.bound();
        String words = Wording.value(unit, value);
        boolean misread = !bound.holds(value)
                && ((!Double.isInfinite(bound.most()) && words.equals(Wording.value(unit, bound.most())))
                        || (!Double.isInfinite(bound.least()) && words.equals(Wording.value(unit, bound.least()))));
        return misread ? Wording.exact(unit, value) : words;
    }

    /**
     * The margin as a part of the bound's own size, so that margins of different measures compare: the width of a bound
     * with two ends, the size of a single one. Least is worst; one without a value is worse than all. A bound without
     * size (at most 0) is never tight while it holds, and by far missed when it does not.
     */
    private static double slack(Finding finding) {
        Bound bound = finding.bound();
        double margin = finding.margin();
        if (bound == null || Double.isNaN(margin)) {
            return Double.NEGATIVE_INFINITY;
        }
        double width = bound.most() - bound.least();
        double end = Double.isInfinite(bound.most()) ? bound.least() : bound.most();
        double size = Double.isInfinite(width) ? Math.abs(end) : width;
        if (size == 0) {
            return margin < 0 ? -Double.MAX_VALUE : Double.MAX_VALUE;
        }
        return margin / size;
    }
}
