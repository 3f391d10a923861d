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
 * @param handCues how many cues a person sent beside those of the drill
 */
public record Verdict(
        boolean met,
        boolean fit,
        String text,
        List<Finding> expectations,
        List<Finding> measures,
        List<SelfCheck> checks,
        int handCues) {

    public Verdict {
        if (handCues < 0) {
            throw new IllegalArgumentException(handCues + " cues by hand");
        }
        expectations = List.copyOf(expectations);
        measures = List.copyOf(measures);
        checks = List.copyOf(checks);
    }

    /** That of a play to which nobody sent a cue. */
    public Verdict(
            boolean met,
            boolean fit,
            String text,
            List<Finding> expectations,
            List<Finding> measures,
            List<SelfCheck> checks) {
        this(met, fit, text, expectations, measures, checks, 0);
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
        return new Verdict(met, fit && check.ok(), sentence, expectations, measures, all, handCues);
    }

    /** The same of a play to which so many cues were sent by hand; its sentence says so. */
    public Verdict withHandCues(int count) {
        if (count == 0) {
            return this;
        }
        String whole = text.endsWith(".") ? text.substring(0, text.length() - 1) : text;
        String sentence = whole + ", with " + Wording.count(count, "cue", "cues") + " by hand.";
        return new Verdict(met, fit, sentence, expectations, measures, checks, count);
    }
}
