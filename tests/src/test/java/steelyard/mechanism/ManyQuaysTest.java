package steelyard.mechanism;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import steelyard.drills.model.Drill;
import steelyard.drills.read.DrillLibrary;
import steelyard.harness.record.Finding;
import steelyard.harness.record.PlayListener;
import steelyard.harness.record.Verdict;
import steelyard.harness.stage.CannotPlay;
import steelyard.harness.stage.live.LiveStage;

/** {@code many-quays}, whole in its backends and cues but with a tenth of its traffic, and with shorter stretches between. */
class ManyQuaysTest {
    private static final long SEED = 1;

    @Test
    void forecast_mechanismsOn_meetsEveryExpectation() {
        Verdict verdict = VirtualPlay.judge(VirtualPlay.read(thinned()), SEED);
        assertThat(verdict.fit()).as(verdict.text()).isTrue();
        assertThat(verdict.expectations()).hasSize(7).allMatch(Finding::met);
    }

    @ParameterizedTest
    @CsvSource({
        "' *retry: .*\\n', '', failed",
        "' *warm-up: .*\\n', '', 'share of zone dogger, from 20 s'",
        "'misses: 3', 'misses: 6', detected-in"
    })
    void forecast_mechanismOff_breaksTheExpectationThatIsAboutIt(
            String pattern, String replacement, String expectation) {
        String text = thinned();
        String without = text.replaceAll(pattern, replacement);
        assertThat(without).isNotEqualTo(text);
        Verdict verdict = VirtualPlay.judge(VirtualPlay.read(without), SEED);
        assertThat(verdict.fit()).as(verdict.text()).isTrue();
        assertThat(verdict.expectations().stream().filter(each -> !each.met()))
                .anyMatch(each -> each.text().startsWith(expectation));
    }

    @Test
    void rehearse_beyondTheGenerator_isRefusedInOneLine() {
        Drill whole = VirtualPlay.read(DrillLibrary.text("many-quays").orElseThrow());
        assertThat(LiveStage.tooMuch(whole)).isTrue();
        try (LiveStage stage = new LiveStage(whole, SEED)) {
            assertThatThrownBy(() -> stage.open(new PlayListener() {}))
                    .isInstanceOf(CannotPlay.class)
                    .hasMessageContaining("200000 requests a second")
                    .hasMessageContaining("forecast it");
        }
    }

    private static String thinned() {
        return DrillLibrary.text("many-quays")
                .orElseThrow()
                .replace("rate: 200000/s", "rate: 20000/s")
                .replace("at: 60s", "at: 5s")
                .replace("at: 150s", "at: 15s")
                .replace("lasts: 5m", "lasts: 60s");
    }
}
