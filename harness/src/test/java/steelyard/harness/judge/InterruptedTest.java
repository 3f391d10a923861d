package steelyard.harness.judge;

import static org.assertj.core.api.Assertions.assertThat;
import static steelyard.harness.record.TestDrill.MS;
import static steelyard.harness.record.TestDrill.S;

import org.junit.jupiter.api.Test;
import steelyard.drills.model.Measure;
import steelyard.harness.record.Finding;
import steelyard.harness.record.Verdict;

/** What can be said of a play that did not come to its end. */
class InterruptedTest {
    private final Play play = new Play()
            .request(S, 10 * MS, null)
            .at(2 * S, to -> to.requestDue(2 * S, 90, 0, 0, 0))
            .at(2_310 * MS, to -> to.interrupted(2_310 * MS));

    private Verdict verdict(Expect expect) {
        return play.verdict(expect.drill(), 3 * S, false);
    }

    @Test
    void verdict_ofIt_saysWhenAndNothingElse() {
        Verdict verdict = verdict(Expect.that(Measure.FAILED).atMost(0));

        assertThat(verdict.text())
                .isEqualTo("Interrupted at 2.3 s: not judged; what was measured up to then stands below.");
        assertThat(verdict.fit()).isFalse();
        assertThat(verdict.exit()).isEqualTo(3);
    }

    @Test
    void finding_windowOverBefore_isJudged() {
        Finding found = verdict(Expect.that(Measure.FAILED).to(2 * S).atMost(0))
                .expectations()
                .get(0);

        assertThat(found.outcome()).isEqualTo("met");
        assertThat(found.measured()).isEqualTo("0 %");
    }

    @Test
    void finding_windowCutShort_isNotReachedAndOpenRequestsAreNoFailures() {
        Finding found =
                verdict(Expect.that(Measure.FAILED).atMost(0)).expectations().get(0);

        assertThat(found.outcome()).isEqualTo("not reached");
        assertThat(found.met()).isFalse();
        assertThat(found.measured()).isEqualTo("0 %");
        assertThat(found.note()).isNull();
        assertThat(found.marginText()).isNull();
    }

    @Test
    void finding_windowAhead_isNotReachedNorMeasured() {
        Finding found = verdict(Expect.that(Measure.FAILED).from(5 * S).atMost(0))
                .expectations()
                .get(0);

        assertThat(found.outcome()).isEqualTo("not reached");
        assertThat(found.measured()).isEqualTo("not measured");
        assertThat(found.note()).isNull();
    }
}
