package steelyard.harness.cli;

import static org.assertj.core.api.Assertions.assertThat;

import java.nio.file.Path;
import java.time.LocalDateTime;
import org.junit.jupiter.api.Test;

class RunPathTest {
    @Test
    void unused_whenNothingIsThere_isStemAndStamp() {
        Path path = RunPath.unused("slow-one", LocalDateTime.of(2001, 2, 3, 4, 5, 6));
        assertThat(path).isEqualTo(Path.of("runs", "slow-one-20010203-040506"));
    }
}
