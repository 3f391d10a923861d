package steelyard.harness.cli;

import java.util.ArrayList;
import java.util.List;
import steelyard.harness.record.SelfCheck;

/** Why a play is unfit to judge, each reason once on a screen, and what to do about it. */
final class UnfitText {
    private static final String GAP = "  ";

    private UnfitText() {}

    /**
     * Lines below the sentence of a verdict; none for a play that is fit, or was merely interrupted.
     *
     * @param said the sentence, which names the first reason
     */
    static List<String> lines(String said, List<SelfCheck> checks, int width) {
        List<String> lines = new ArrayList<>();
        List<SelfCheck> failed = checks.stream()
                .filter(check -> !check.ok() && !check.check().equals(SelfCheck.PLAYED_TO_ITS_END))
                .toList();
        for (SelfCheck check : failed) {
            if (!said.contains(check.text())) {
                lines.addAll(
                        VerdictText.wrapped("", "Unfit to judge: " + check.check() + ": " + check.text() + ".", width));
            }
        }
        failed.stream()
                .map(UnfitText::remedy)
                .distinct()
                .forEach(remedy -> lines.addAll(VerdictText.wrapped(GAP, remedy, width)));
        return lines;
    }

    private static String remedy(SelfCheck check) {
        if (check.check().equals("lateness of the generator")) {
            return "Play it on a machine that does nothing else, or lower the rate of the traffic.";
        }
        if (check.check().equals("connection cap")) {
            return "Raise connections of the stage, or lower the rate or the give-up of the traffic.";
        }
        if (check.text().contains("not of this play")) {
            return "Nobody else may send requests to the front or the backends while a drill is played.";
        }
        return check.check().equals("record of the run")
                ? "Make room on the disk, or name another folder with --out."
                : "Play it again; if it comes again, it is a fault of Steelyard, and the run folder shows it.";
    }
}
