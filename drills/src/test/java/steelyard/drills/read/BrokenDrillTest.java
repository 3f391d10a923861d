package steelyard.drills.read;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Collections;
import java.util.List;
import java.util.stream.Stream;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.condition.EnabledOnOs;
import org.junit.jupiter.api.condition.OS;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.MethodSource;
import org.snakeyaml.engine.v2.exceptions.YamlEngineException;

/**
 * Every broken drill of the folder {@code broken} against the file {@code .problems} beside it: its first line says
 * what the JSON Schema makes of it ({@code schema: refuses}, {@code passes} or {@code cannot read}), the others are
 * the reader's problems in order, without the name of the file.
 */
class BrokenDrillTest {
    private static final Path FOLDER = Path.of("src/test/resources/steelyard/drills/broken");

    static List<String> names() throws IOException {
        try (Stream<Path> files = Files.list(FOLDER)) {
            return files.map(file -> file.getFileName().toString())
                    .filter(name -> name.endsWith(".yaml"))
                    .map(name -> name.replace(".yaml", ""))
                    .sorted()
                    .toList();
        }
    }

    @Test
    void names_ofBrokenDrills_areMany() throws IOException {
        assertThat(names()).hasSizeGreaterThan(180);
    }

    @ParameterizedTest
    @MethodSource("names")
    void read_ofABrokenDrill_saysEveryProblemWithItsPlace(String name) throws IOException {
        Path file = FOLDER.resolve(name + ".yaml");
        List<String> expected = Files.readAllLines(FOLDER.resolve(name + ".problems"));
        Parsed<?> parsed = DrillReader.read(file);
        List<String> shown = parsed.problems().stream().map(Problem::toString).toList();
        assertThat(parsed.value()).isEmpty();
        assertThat(shown)
                .containsExactlyElementsOf(
                        expected.stream().skip(1).map(line -> file + ":" + line).toList());
    }

    @ParameterizedTest
    @MethodSource("names")
    void schema_ofABrokenDrill_seesWhatIsWrongWithItsShape(String name) throws IOException {
        String text = Files.readString(FOLDER.resolve(name + ".yaml"));
        String expected = Files.readAllLines(FOLDER.resolve(name + ".problems")).get(0);
        assertThat("schema: " + verdict(text)).isEqualTo(expected);
    }

    private static String verdict(String text) {
        try {
            return SchemaCheck.complaints(text).isEmpty() ? "passes" : "refuses";
        } catch (YamlEngineException e) {
            return "cannot read";
        }
    }

    @Test
    void read_ofATenMegabyteFile_isRefusedInOneLine(@TempDir Path folder) throws IOException {
        Path file = folder.resolve("large.yaml");
        Files.writeString(file, "# padding\n".repeat(1_000_000));
        assertThat(DrillReader.read(file).problems())
                .singleElement()
                .satisfies(problem -> assertThat(problem)
                        .hasToString(file + ": the file holds 10000 kB; a drill holds at most 1048 kB; backends with"
                                + " times: 40 save lines"));
    }

    @Test
    @EnabledOnOs(OS.LINUX)
    void read_ofADeviceWithoutEnd_isRefusedAtTheLimit() {
        assertThat(DrillReader.read(Path.of("/dev/zero")).problems())
                .singleElement()
                .satisfies(problem -> assertThat(problem.message()).startsWith("the file holds 1048 kB"));
    }

    @Test
    void read_ofAnAliasBomb_isRefusedAtTheAliasThatGoesTooFar() {
        StringBuilder text = new StringBuilder("drill: &a0 [x, x, x, x, x, x, x, x, x, x]\n");
        for (int i = 1; i < 30; i++) {
            String before = "*a" + (i - 1);
            text.append("level").append(i).append(": &a").append(i).append(" [");
            text.append(String.join(", ", Collections.nCopies(10, before))).append("]\n");
        }
        assertThat(DrillReader.read("bomb", text.toString()).problems())
                .singleElement()
                .hasToString("bomb:6:14: more than 200000 values, aliases counted each time; use fewer aliases");
    }

    @Test
    void read_ofAVeryDeepText_isRefusedWithoutRecursingIntoIt() {
        assertThat(DrillReader.read("deep", "drill: " + "[".repeat(500_000)).problems())
                .singleElement()
                .hasToString("deep:1:38: nested more than 30 deep; a drill needs 8 levels");
    }

    @Test
    void read_ofAFileThatIsNotUtf8_isRefused(@TempDir Path folder) throws IOException {
        Path file = Files.write(folder.resolve("latin.yaml"), "drill: Fähre".getBytes(StandardCharsets.ISO_8859_1));
        assertThat(DrillReader.read(file).problems())
                .singleElement()
                .hasToString(file + ": the file is not UTF-8; save the drill as UTF-8 text");
    }

    @Test
    void read_ofWhatIsNoFile_saysSo(@TempDir Path folder) {
        Path file = folder.resolve("none.yaml");
        assertThat(DrillReader.read(file).problems())
                .singleElement()
                .hasToString(file + ": there is no such file; steelyard drills lists the bundled ones");
        assertThat(DrillReader.read(folder).problems())
                .singleElement()
                .hasToString(folder + ": this is a folder; name a drill file in it");
    }
}
