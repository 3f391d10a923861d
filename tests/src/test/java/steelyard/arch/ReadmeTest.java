package steelyard.arch;

import static org.assertj.core.api.Assertions.assertThat;

import com.fasterxml.jackson.databind.JsonNode;
import com.fasterxml.jackson.databind.ObjectMapper;
import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Arrays;
import java.util.List;
import java.util.Set;
import java.util.TreeSet;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import java.util.stream.Stream;
import org.junit.jupiter.api.Test;
import steelyard.drills.model.Cause;
import steelyard.drills.model.Cue;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Measure;
import steelyard.drills.model.Pool;
import steelyard.drills.model.Standing;
import steelyard.drills.model.Worded;
import steelyard.drills.read.DrillReader;
import steelyard.drills.read.DrillSchema;
import steelyard.drills.read.Parsed;

/** The page that people read first leaves out no word of the format, and what it shows works. */
class ReadmeTest {
    private static final Pattern DRILL = Pattern.compile("```yaml\\R(drill: .*?)```", Pattern.DOTALL);
    private static final Pattern LINK = Pattern.compile("!?\\[[^\\]]*]\\(([^)#]+)\\)");

    private final String readme = text("README.md");

    private static String text(String name) {
        try {
            return Files.readString(House.root().resolve(name), StandardCharsets.UTF_8);
        } catch (IOException failure) {
            throw new UncheckedIOException(failure);
        }
    }

    @Test
    void readme_always_namesEveryWordOfTheFormat() {
        List<String> missing = Stream.<Worded[]>of(
                        Cue.Kind.values(),
                        Measure.values(),
                        Cause.values(),
                        Standing.values(),
                        Pool.Method.values(),
                        Pool.Count.values(),
                        Pool.Weights.values())
                .flatMap(Arrays::stream)
                .map(Worded::word)
                .filter(word -> lacks("[`( ]" + Pattern.quote(word) + "[`: ,)]"))
                .toList();
        assertThat(missing).isEmpty();
    }

    @Test
    void readme_always_namesEveryKeyOfTheFormat() throws IOException {
        Set<String> keys = new TreeSet<>();
        collect(new ObjectMapper().readTree(DrillSchema.text()), keys);
        assertThat(keys).hasSizeGreaterThan(60).contains("drill", "warm-up", "quantile");
        keys.removeIf(key -> !lacks("[`{ \\[\n]" + Pattern.quote(key) + "[`:]"));
        assertThat(keys).isEmpty();
    }

    /** The format has true and false, and no other words for them. */
    @Test
    void readme_always_writesSwitchesAsTheReaderTakesThem() {
        assertThat(lacks("`[a-z-]+: (yes|no|on|off)`")).isTrue();
    }

    private boolean lacks(String pattern) {
        return !Pattern.compile(pattern).matcher(readme).find();
    }

    private static void collect(JsonNode node, Set<String> keys) {
        JsonNode properties = node.path("properties");
        if (properties.isObject()) {
            properties.fieldNames().forEachRemaining(keys::add);
        }
        node.forEach(child -> collect(child, keys));
    }

    @Test
    void drillOfTheReadme_whenRead_isOk() {
        Matcher drill = DRILL.matcher(readme);
        assertThat(drill.find()).isTrue();
        Parsed<Drill> parsed = DrillReader.read("README.md", drill.group(1));
        assertThat(parsed.problems()).isEmpty();
        assertThat(parsed.ok()).isTrue();
    }

    @Test
    void links_ofThePages_leadToFiles() {
        for (String page : Set.of("README.md", "DEVELOPERS.md")) {
            Matcher link = LINK.matcher(text(page));
            while (link.find()) {
                Path file = House.root().resolve(link.group(1));
                assertThat(file).as(page).exists();
            }
        }
    }
}
