package steelyard.harness.forecast;

import java.util.ArrayList;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;
import steelyard.harness.record.Finding;
import steelyard.harness.record.SelfCheck;
import steelyard.harness.record.Verdict;

/**
 * What one play came to. Immutable.
 *
 * <p>Values are in the unit of their measure (nanoseconds, fraction, count), NaN where a figure has none, in the order of
 * {@link Played#figures}.
 */
public final class Play {
    private final int number;
    private final long seed;
    private final List<Figure> figures;
    private final double[] values;
    private final Map<Integer, Gap> gaps;
    private final List<SelfCheck> checks;

    private Play(
            int number,
            long seed,
            List<Figure> figures,
            double[] values,
            Map<Integer, Gap> gaps,
            List<SelfCheck> checks) {
        this.number = number;
        this.seed = seed;
        this.figures = figures;
        this.values = values;
        this.gaps = Map.copyOf(gaps);
        this.checks = List.copyOf(checks);
    }

    /** @param figures those of the verdict's findings; one list for all plays of a series */
    static Play of(int number, long seed, List<Figure> figures, Verdict verdict) {
        List<Finding> findings = findings(verdict);
        double[] values = new double[findings.size()];
        Map<Integer, Gap> gaps = new HashMap<>();
        for (int figure = 0; figure < values.length; figure++) {
            Finding finding = findings.get(figure);
            values[figure] = finding.value();
            if (Double.isNaN(finding.value())) {
                gaps.put(figure, new Gap(finding.measured(), finding.note()));
            }
        }
        return new Play(number, seed, figures, values, gaps, verdict.checks());
    }

    /** The findings of a verdict in the order of the figures: expectations, then the standard set. */
    static List<Finding> findings(Verdict verdict) {
        List<Finding> findings = new ArrayList<>(verdict.expectations());
        findings.addAll(verdict.measures());
        return findings;
    }

    /** From 0, in the order of the seeds. */
    public int number() {
        return number;
    }

    public long seed() {
        return seed;
    }

    /** What its values are values of. */
    public List<Figure> figures() {
        return figures;
    }

    /** The value of a figure, or NaN. */
    public double value(int figure) {
        return values[figure];
    }

    /** Why a figure has no value; null where it has one. */
    public @Nullable Gap gap(int figure) {
        return gaps.get(figure);
    }

    public List<SelfCheck> checks() {
        return checks;
    }

    /** Whether every self-check held. */
    public boolean fit() {
        return checks.stream().allMatch(SelfCheck::ok);
    }

    /**
     * Why a figure has no value.
     *
     * @param word {@code never}, {@code not measured}, {@code infinite}
     * @param why the reason in words, where there is more to say
     */
    public record Gap(String word, @Nullable String why) {}
}
