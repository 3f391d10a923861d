package steelyard.harness.forecast;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.ArrayList;
import java.util.List;
import org.junit.jupiter.api.Test;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Expectation.Bound;
import steelyard.drills.model.Measure;
import steelyard.drills.read.DrillLibrary;
import steelyard.drills.read.DrillReader;
import steelyard.harness.record.Finding;
import steelyard.harness.record.SelfCheck;
import steelyard.harness.record.Verdict;

/** Forecasts of plays that were made up. */
class ForecastTest {
    private static final Bound AT_MOST_2 = new Bound(Double.NEGATIVE_INFINITY, 0.02);
    private static final Drill DRILL = DrillReader.read(
                    "drill", DrillLibrary.text("slow-one").orElseThrow())
            .value()
            .orElseThrow();

    private static Verdict play(double failed, double detectedNanos, boolean fit) {
        boolean never = Double.isNaN(detectedNanos);
        Finding share = new Finding(Measure.FAILED, null, "failed, whole play", AT_MOST_2, "", failed, null);
        Finding detected = new Finding(
                Measure.DETECTED_IN,
                "fulmar",
                "detected-in of fulmar, after it dies",
                new Bound(0, 3e9),
                never ? "never" : "",
                detectedNanos,
                never ? "it was picked to the end" : null);
        Finding peak = new Finding(Measure.PEAK_IN_FLIGHT, null, "peak-in-flight, whole play", null, "", 40, null);
        SelfCheck check = new SelfCheck("connection cap", fit, fit ? "never hit" : "hit 3 times");
        return new Verdict(true, fit, "", List.of(share, detected), List.of(peak), List.of(check));
    }

    private static Forecast forecast(double hold, Verdict... verdicts) {
        List<Figure> figures =
                Play.findings(verdicts[0]).stream().map(Figure::of).toList();
        List<Play> plays = new ArrayList<>();
        for (int number = 0; number < verdicts.length; number++) {
            plays.add(Play.of(number, 7L + number, figures, verdicts[number]));
        }
        return Forecast.of(new Played(Series.of(DRILL, 7, verdicts.length), figures, 2, plays), hold);
    }

    private static Verdict[] tenOfWhich(int missed) {
        Verdict[] verdicts = new Verdict[10];
        for (int number = 0; number < 10; number++) {
            verdicts[number] = play(number < missed ? 0.03 : 0.01, 2e9, true);
        }
        return verdicts;
    }

    @Test
    void forecast_withAsManyPlaysAsItsHold_isMet() {
        Forecast forecast = forecast(0.9, tenOfWhich(1));
        assertThat(forecast.met()).isTrue();
        assertThat(forecast.fit()).isTrue();
        assertThat(forecast.text())
                .isEqualTo("Met: all 2 expectations held in at least 90 % of 10 plays; tightest: failed, whole play: "
                        + "held in 90 %, median 1 %, bound at most 2 %.");
        assertThat(forecast.expectations().get(0).heldText()).isEqualTo("90 % (55.5 % to 99.7 %)");
        assertThat(forecast.measures().get(0).measured()).isEqualTo("40 (always)");
    }

    @Test
    void forecast_withOnePlayTooFew_isNotMet() {
        Forecast forecast = forecast(0.9, tenOfWhich(2));
        assertThat(forecast.met()).isFalse();
        assertThat(forecast.text())
                .isEqualTo("Not met: 1 of 2 expectations held in less than 90 % of 10 plays; worst: failed, whole "
                        + "play: held in 80 %, median 1 %, bound at most 2 %.");
        assertThat(forecast(0.8, tenOfWhich(2)).met()).isTrue();
    }

    @Test
    void forecast_withOneUnfitPlay_isUnfitAndNamesItsSeed() {
        Forecast forecast = forecast(0.5, play(0.01, 2e9, true), play(0.01, 2e9, false), play(0.01, 2e9, true));
        assertThat(forecast.fit()).isFalse();
        assertThat(forecast.text())
                .isEqualTo("Unfit to judge: connection cap does not hold in 1 of 3 plays; with seed 8: hit 3 times.");
    }

    @Test
    void figure_withoutAValueInSomePlays_doesNotHoldThereAndIsCounted() {
        Forecast forecast = forecast(0.5, play(0.01, Double.NaN, true), play(0.01, 2e9, true), play(0.01, 2.5e9, true));
        Foreseen detected = forecast.expectations().get(1);
        assertThat(detected.held().held()).isEqualTo(2);
        assertThat(detected.spread().undefined()).isEqualTo(1);
        assertThat(detected.measured()).isEqualTo("2.25 s (2 s to 2.5 s)");
        assertThat(detected.note()).isEqualTo("never in 1 of 3 plays (it was picked to the end)");
    }

    @Test
    void figure_withoutAnyValue_saysWhyInsteadOfOne() {
        Forecast forecast = forecast(0.5, play(0.01, Double.NaN, true), play(0.01, Double.NaN, true));
        Foreseen detected = forecast.expectations().get(1);
        assertThat(detected.measured()).isEqualTo("never");
        assertThat(detected.met()).isFalse();
    }

    @Test
    void titles_thatWouldBeTheSame_areToldApart() {
        Figure failed = new Figure(Measure.FAILED, null, "failed, whole play", AT_MOST_2);
        Figure free = new Figure(Measure.FAILED, null, "failed, whole play", null);
        assertThat(PlayRows.titles(List.of(failed, failed, free)))
                .containsExactly(
                        "failed, whole play: at most 2 %", "failed, whole play: at most 2 % (2)", "failed, whole play");
    }
}
