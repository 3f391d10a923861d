package steelyard.drills.read;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

class QuantityTest {
    private static final Place HERE = new Place(3, 7);

    private static <T> T parse(Quantity<T> quantity, String text) {
        Problems problems = new Problems("f");
        T value = quantity.parse(new Placed<>(HERE, text), "key", problems);
        assertThat(problems.inOrder()).as(text).isEmpty();
        return value;
    }

    private static String problem(Quantity<?> quantity, String text) {
        Problems problems = new Problems("f");
        assertThat((Object) quantity.parse(new Placed<>(HERE, text), "key", problems))
                .isNull();
        assertThat(problems.inOrder()).hasSize(1);
        return problems.inOrder().get(0).toString();
    }

    @ParameterizedTest
    @CsvSource({
        "250ms, 250000000",
        "1.5s, 1500000000",
        "2m, 120000000000",
        "1m30s, 90000000000",
        "100us, 100000",
        "0.1us, 100",
        "1h, 3600000000000",
        "24h, 86400000000000",
        "1s500ms, 1500000000",
        ".5s, 500000000",
        "0s, 0"
    })
    void duration_inEachForm_isNanoseconds(String text, long nanos) {
        assertThat(parse(Durations.DURATION, text)).isEqualTo(nanos);
    }

    @ParameterizedTest
    @ValueSource(strings = {"s", "1 s", "-1s", "1s1m", "1s1s", "1.2.3s", "1e3s", "1d", "1S", "s1", "1s2", "1.s"})
    void duration_inNoForm_isRefused(String text) {
        assertThat(problem(Durations.DURATION, text)).contains("is not a duration");
    }

    @Test
    void duration_withoutUnit_namesTheUnits() {
        assertThat(problem(Durations.DURATION, "15"))
                .isEqualTo("f:3:7: '15' for 'key' has no unit; write 15ms, 15s or 15m");
    }

    @Test
    void duration_thatIsEndless_isRefusedNotOverflowing() {
        assertThat(problem(Durations.DURATION, "999999999999999h")).contains("is longer than a day");
        assertThat(problem(Durations.DURATION, "9".repeat(300) + "s")).contains("is not a duration");
    }

    @ParameterizedTest
    @CsvSource({"0, 0s", "1500000000, 1.5s", "90000000000, 90s", "250000000, 250ms", "-1000000000, -1s", "1500, 1.5us"})
    void durationText_ofNanoseconds_readsLikeADrill(long nanos, String text) {
        assertThat(Durations.text(nanos)).isEqualTo(text);
    }

    @ParameterizedTest
    @CsvSource({"300/s, 300", "1200/m, 20", "0.5/s, 0.5", "300 / s, 300", "0/s, 0"})
    void rate_inEachForm_isPerSecond(String text, double perSecond) {
        assertThat(parse(Rates.RATE, text)).isEqualTo(perSecond);
    }

    @ParameterizedTest
    @ValueSource(strings = {"300/h", "/s", "300s", "300/", "300/s/s"})
    void rate_inNoForm_isRefused(String text) {
        assertThat(problem(Rates.RATE, text)).contains("is not a rate");
    }

    @ParameterizedTest
    @CsvSource({"20%, 0.2", "0.3%, 0.003", "100%, 1", "0%, 0", "12.5 %, 0.125"})
    void share_inPercent_isAFraction(String text, double fraction) {
        assertThat(parse(Shares.SHARE, text)).isEqualTo(fraction);
    }

    @ParameterizedTest
    @CsvSource({"512B, 512", "4KiB, 4096", "1MiB, 1048576", "0.5KiB, 512", "0B, 0", "16MiB, 16777216"})
    void size_inEachForm_isBytes(String text, int bytes) {
        assertThat(parse(Sizes.SIZE, text)).isEqualTo(bytes);
    }

    @ParameterizedTest
    @ValueSource(strings = {"17MiB", "-1B", "999999999999999MiB"})
    void size_outOfRange_isRefused(String text) {
        assertThat(problem(Sizes.SIZE, text)).contains("is out of range");
    }

    @ParameterizedTest
    @ValueSource(strings = {"1.0", "1e3", "", "0x10", "-"})
    void wholeNumber_inNoForm_isRefused(String text) {
        assertThat(problem(Numbers.from(0, 10), text)).contains("is not a whole number");
    }

    @ParameterizedTest
    @ValueSource(strings = {"11", "-1", "2147483648", "-2147483649", "99999999999999999999999"})
    void wholeNumber_beyondItsRange_isToldTheRange(String text) {
        assertThat(problem(Numbers.from(0, 10), text)).contains("is out of range; write a whole number from 0 to 10");
    }

    @ParameterizedTest
    @CsvSource({
        "met, method",
        "war, warm-up",
        "wieght, weight",
        "Weight, weight",
        "warm_up, warm-up",
        "warmup, warm-up",
        "weihgt, weight",
        "weigh, weight",
        "weights, weight"
    })
    void nearest_ofASlip_isTheWordMeant(String written, String meant) {
        assertThat(NearWord.nearest(written, List.of("method", "warm-up", "weight", "host")))
                .isEqualTo(meant);
    }

    @ParameterizedTest
    @ValueSource(strings = {"colour", "x", "", "hostess", "waterways"})
    void nearest_ofAnotherWord_isNothing(String written) {
        assertThat(NearWord.nearest(written, List.of("method", "warm-up", "weight", "host")))
                .isNull();
    }

    @Test
    void nearest_ofTwoCloseWords_isTheCloser() {
        assertThat(NearWord.nearest("weigt", List.of("weights", "weight"))).isEqualTo("weight");
    }
}
