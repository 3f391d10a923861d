package steelyard.harness.report;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.Map;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import steelyard.harness.report.Stretches.Stretch;

class StretchesTest {
    private static final String HEAD = "due,at,cue,action,by\n";

    @Test
    void of_oneCue_splitsThePlayAtItsSlice(@TempDir Path folder) throws IOException {
        List<Stretch> stretches = Stretches.of(RunFiles.read(TinyRun.write(folder)));

        assertThat(stretches).hasSize(2);
        Stretch before = stretches.get(0);
        assertThat(before.from()).isZero();
        assertThat(before.to()).isCloseTo(0.4, within(1e-9));
        assertThat(before.cues()).isEmpty();
        assertThat(before.offered()).isEqualTo(40);
        assertThat(before.failed()).isEqualTo(Map.of("refused", 0.0));
        assertThat(before.p50()).isEqualTo(10);
        assertThat(before.parts().get(0).share()).isEqualTo(0.5);
        assertThat(before.parts().get(1).utilisation()).isEqualTo(0.25);
        Stretch after = stretches.get(1);
        assertThat(after.cues()).containsExactly("fulmar, \"the\" first, dies");
        assertThat(after.offered()).isEqualTo(120);
        assertThat(after.ok()).isEqualTo(60);
        assertThat(after.failed()).isEqualTo(Map.of("refused", 60.0));
        assertThat(after.p99()).isEqualTo(42);
        assertThat(after.parts().get(1).utilisation()).isCloseTo(0.75, within(1e-9));
    }

    @Test
    void of_quantiles_areWeightedByGoodAnswers(@TempDir Path folder) throws IOException {
        TinyRun.write(folder);
        Files.writeString(folder.resolve("cues.csv"), HEAD);

        // 4 slices of 10 good answers at 10 ms and 6 of 10 at 40 ms: (40 x 10 + 60 x 40) / 100.
        assertThat(Stretches.of(RunFiles.read(folder)))
                .singleElement()
                .satisfies(whole -> assertThat(whole.p50()).isCloseTo(28, within(1e-9)));
    }

    @Test
    void of_cuesOfOneSlice_splitOnce(@TempDir Path folder) throws IOException {
        TinyRun.write(folder);
        Files.writeString(folder.resolve("cues.csv"), HEAD + "0.51,0.51,a,kill a,drill\n0.52,0.52,b,kill b,drill\n");

        List<Stretch> stretches = Stretches.of(RunFiles.read(folder));

        assertThat(stretches).hasSize(2);
        assertThat(stretches.get(1).cues()).containsExactly("a", "b");
    }

    @Test
    void of_cuesAtTheEdges_openNoEmptyStretch(@TempDir Path folder) throws IOException {
        TinyRun.write(folder);
        Files.writeString(folder.resolve("cues.csv"), HEAD + "0,0,first,kill a,drill\n1.0,1.0001,last,kill b,drill\n");

        List<Stretch> stretches = Stretches.of(RunFiles.read(folder));

        assertThat(stretches).singleElement().satisfies(whole -> {
            assertThat(whole.cues()).containsExactly("first");
            assertThat(whole.offered()).isEqualTo(160);
        });
    }
}
