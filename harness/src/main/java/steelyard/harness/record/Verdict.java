package steelyard.harness.record;

import java.util.ArrayList;
import java.util.List;

/**
 * What is to be said about a play.
 *
 * @param met every expectation held
 * @param fit every self-check held; the word met means nothing otherwise
 * @param text one sentence that names the expectation that decided, or the reason why the play is unfit
 * @param expectations in the order of the drill
 * @param measures the standard set, the same for every play
 */
public record Verdict(
        boolean met,
        boolean fit,
        String text,
        List<Finding> expectations,
        List<Finding> measures,
        List<SelfCheck> checks) {

    public Verdict {
        expectations = List.copyOf(expectations);
        measures = List.copyOf(measures);
        checks = List.copyOf(checks);
    }

    /** The exit status that goes with it: 0 met, 1 not met, 3 unfit to judge. An interruption has one of its own. */
    public int exit() {
        if (!fit) {
            return 3;
        }
        return met ? 0 : 1;
    }

    /** The same with one more self-check; one that does not hold makes the play unfit and is named first. */
    public Verdict with(SelfCheck check) {
        List<SelfCheck> all = new ArrayList<>(checks);
        all.add(check);
        String sentence = check.ok() || !fit ? text : "Unfit to judge: " + check.text() + ".";
        return new Verdict(met, fit && check.ok(), sentence, expectations, measures, all);
    }
}
