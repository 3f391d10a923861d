package steelyard.harness.stage.virtual;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.TimeZone;
import java.util.concurrent.ExecutionException;
import java.util.concurrent.ExecutorService;
import java.util.concurrent.Executors;
import java.util.concurrent.Future;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import steelyard.drills.model.Drill;

/** The same drill, seed and transport tell the same account, to the last number, whatever goes on around. */
class VirtualStageDeterminismTest {
    private static final long SEED = 11;

    @ParameterizedTest
    @ValueSource(strings = {"lose-one-of-three", "drain-for-patching", "slow-one", "uneven-hosts", "reweigh-live"})
    void play_afterOtherPlaysInTheSameProcess_tellsTheSame(String name) {
        Drill drill = Told.bundled(name);
        String fresh = Told.by(drill, SEED);
        assertThat(fresh).hasSizeGreaterThan(100_000);
        assertThat(Told.by(drill, SEED + 1)).isNotEqualTo(fresh);
        assertThat(Told.by(Told.bundled(name), SEED)).isEqualTo(fresh);
    }

    @Test
    void play_onSeveralThreadsAtOnce_tellsTheSame() throws InterruptedException, ExecutionException {
        Drill drill = Told.bundled("lose-one-of-three");
        String alone = Told.by(drill, SEED);
        ExecutorService threads = Executors.newFixedThreadPool(4);
        try {
            List<Future<String>> plays = new ArrayList<>();
            for (int i = 0; i < 4; i++) {
                // Odd ones play something else, so that a state shared by mistake would be stirred.
                long seed = SEED + i % 2;
                plays.add(threads.submit(() -> Told.by(drill, seed)));
            }
            assertThat(plays.get(0).get()).isEqualTo(alone);
            assertThat(plays.get(2).get()).isEqualTo(alone);
            assertThat(plays.get(1).get()).isEqualTo(plays.get(3).get()).isNotEqualTo(alone);
        } finally {
            threads.shutdownNow();
        }
    }

    @Test
    void play_underAnotherLocaleAndTimeZone_tellsTheSame() {
        Drill drill = Told.bundled("drain-for-patching");
        String usual = Told.by(drill, SEED);
        Locale locale = Locale.getDefault();
        TimeZone zone = TimeZone.getDefault();
        try {
            Locale.setDefault(Locale.forLanguageTag("tr-TR"));
            TimeZone.setDefault(TimeZone.getTimeZone("Asia/Kathmandu"));
            assertThat(Told.by(Told.bundled("drain-for-patching"), SEED)).isEqualTo(usual);
            Locale.setDefault(Locale.forLanguageTag("ar-EG-u-nu-arab"));
            assertThat(Told.by(Told.bundled("drain-for-patching"), SEED)).isEqualTo(usual);
        } finally {
            Locale.setDefault(locale);
            TimeZone.setDefault(zone);
        }
    }
}
