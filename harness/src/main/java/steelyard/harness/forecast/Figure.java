package steelyard.harness.forecast;

import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Expectation.Bound;
import steelyard.drills.model.Measure;
import steelyard.drills.model.Measure.Unit;
import steelyard.harness.record.Finding;
import steelyard.harness.record.Wording;

/**
 * One of the figures that every play of a drill gives: that of an expectation, or one of the standard set.
 *
 * @param of the target as a person reads it, or null for the whole stage
 * @param text what is measured, in words: {@code failed, from 14.9 s to 20 s}
 * @param bound null in the standard set
 */
public record Figure(
        Measure measure,
        @Nullable String of,
        String text,
        @Nullable Bound bound) {

    static Figure of(Finding finding) {
        return new Figure(finding.measure(), finding.of(), finding.text(), finding.bound());
    }

    /** What its values are counted in. */
    public Unit unit() {
        return measure.unit();
    }

    /** The bound in words, or null. */
    public @Nullable String boundText() {
        return bound == null ? null : Wording.bound(unit(), bound);
    }

    /** Whether a value holds the bound; NaN never does. True where nothing is expected. */
    public boolean holds(double value) {
        return bound == null || bound.holds(value);
    }

    /** A name for a column: with the bound where there is one, so that an expectation is told from a measure. */
    public String title() {
        return bound == null ? text : text + ": " + boundText();
    }
}
