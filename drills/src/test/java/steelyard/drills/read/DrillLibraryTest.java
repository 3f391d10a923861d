package steelyard.drills.read;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Duration;
import java.util.List;
import java.util.stream.Stream;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.MethodSource;
import steelyard.drills.model.Drill;

class DrillLibraryTest {
    static List<String> names() {
        return DrillLibrary.names();
    }

    @ParameterizedTest
    @MethodSource("names")
    void text_ofABundledDrill_isPlayable(String name) {
        Parsed<Drill> parsed =
                DrillReader.read(name + ".yaml", DrillLibrary.text(name).orElseThrow());
        assertThat(parsed.problems())
                .allSatisfy(problem -> assertThat(problem.severity()).isEqualTo(Problem.Severity.NOTICE));
        assertThat(parsed.value()).isPresent();
        assertThat(parsed.value().orElseThrow().expectations()).hasSizeGreaterThanOrEqualTo(4);
    }

    @ParameterizedTest
    @MethodSource("rehearsable")
    void text_ofABundledDrill_suitsASmallMachine(String name) {
        Drill drill = DrillReader.read(name, DrillLibrary.text(name).orElseThrow())
                .value()
                .orElseThrow();
        double rate = drill.traffic().stream()
                .mapToDouble(stream -> stream.steps().get(0).perSecond())
                .sum();
        assertThat(Duration.ofNanos(drill.lastsNanos())).isBetween(Duration.ofSeconds(30), Duration.ofSeconds(60));
        assertThat(rate).isBetween(300.0, 900.0);
        assertThat(drill.about()).contains("Watch");
    }

    /** All but the one that is there to be more than a machine can rehearse. */
    static Stream<String> rehearsable() {
        return DrillLibrary.names().stream().filter(name -> !name.equals("many-quays"));
    }

    @Test
    void names_areTheFilesOfTheFolder() throws IOException {
        try (var files = Files.list(Path.of("library"))) {
            assertThat(files.map(file -> file.getFileName().toString().replace(".yaml", "")))
                    .containsExactlyInAnyOrderElementsOf(DrillLibrary.names());
        }
    }

    @Test
    void text_ofAnUnknownName_isEmpty() {
        assertThat(DrillLibrary.text("../drill.schema")).isEmpty();
    }
}
