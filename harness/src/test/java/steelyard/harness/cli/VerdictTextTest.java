package steelyard.harness.cli;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.List;
import org.junit.jupiter.api.Test;
import steelyard.drills.model.Expectation.Bound;
import steelyard.drills.model.Measure;
import steelyard.harness.record.Finding;
import steelyard.harness.record.SelfCheck;
import steelyard.harness.record.Verdict;

class VerdictTextTest {
    private static final double NONE = Double.NEGATIVE_INFINITY;

    private final Finding failed =
            new Finding(Measure.FAILED, null, "failed", new Bound(NONE, 0.003), "0.12 %", 0.0012, null);
    private final Finding detected = new Finding(
            Measure.DETECTED_IN,
            "fulmar",
            "detected-in of fulmar",
            new Bound(1.9e9, 3.2e9),
            "never",
            Double.NaN,
            "it stayed up");

    private Verdict verdict(boolean fit, Finding... findings) {
        List<SelfCheck> checks = List.of(new SelfCheck("lateness of the generator", fit, "99 % within 9 ms"));
        return new Verdict(false, fit, "Not met: detected-in.", List.of(findings), List.of(), checks);
    }

    @Test
    void lines_withRoom_areATableWithNumbersOnTheRight() {
        assertThat(VerdictText.lines(verdict(true, failed, detected), 200))
                .containsExactly(
                        "Not met: detected-in.",
                        "",
                        "expectation                          bound  measured  margin",
                        "failed                       at most 0.3 %    0.12 %  0.18 %  met",
                        "detected-in of fulmar  from 1.9 s to 3.2 s     never          not met",
                        "note on detected-in of fulmar: it stayed up",
                        "1 of 2 met");
    }

    @Test
    void lines_withoutRoom_standOneBelowTheOther() {
        List<String> lines = VerdictText.lines(verdict(true, failed, detected), 40);
        assertThat(lines)
                .containsExactly(
                        "Not met: detected-in.",
                        "",
                        "met: failed",
                        "  bound     at most 0.3 %",
                        "  measured  0.12 %",
                        "  margin    0.18 %",
                        "not met: detected-in of fulmar",
                        "  bound     from 1.9 s to 3.2 s",
                        "  measured  never",
                        "  note      it stayed up",
                        "1 of 2 met");
    }

    @Test
    void lines_ofAnUnfitPlay_sayWhy() {
        assertThat(VerdictText.lines(verdict(false), 100))
                .containsExactly(
                        "Not met: detected-in.",
                        "Unfit to judge: lateness of the generator: 99 % within 9 ms.",
                        "  Play it on a machine that does nothing else, or lower the rate of the traffic.");
    }

    @Test
    void lines_ofAnUnfitPlay_sayAReasonOnceAndGiveNoVerdict() {
        SelfCheck strangers = new SelfCheck("attempts", false, "80 agree, 3 not of this play");
        Verdict verdict = new Verdict(
                false,
                false,
                "Unfit to judge: attempts: 80 agree, 3 not of this play.",
                List.of(failed),
                List.of(),
                List.of(strangers));
        assertThat(VerdictText.lines(verdict, 120))
                .containsExactly(
                        "Unfit to judge: attempts: 80 agree, 3 not of this play.",
                        "  Nobody else may send requests to the front or the backends while a drill is played.",
                        "",
                        "expectation          bound  measured  margin",
                        "failed       at most 0.3 %    0.12 %  0.18 %  (met)");
    }
}
