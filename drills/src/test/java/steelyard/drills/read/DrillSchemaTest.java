package steelyard.drills.read;

import static org.assertj.core.api.Assertions.assertThat;

import com.fasterxml.jackson.databind.JsonNode;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.Set;
import java.util.TreeSet;
import java.util.stream.Stream;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.EnumSource;
import org.junit.jupiter.params.provider.MethodSource;
import steelyard.drills.model.Affinity;
import steelyard.drills.model.Cause;
import steelyard.drills.model.Delay;
import steelyard.drills.model.Forwarded;
import steelyard.drills.model.Front;
import steelyard.drills.model.Hashing;
import steelyard.drills.model.Measure;
import steelyard.drills.model.Pool;
import steelyard.drills.model.Probe;
import steelyard.drills.model.Standing;
import steelyard.drills.model.Trace;
import steelyard.drills.model.Traffic;
import steelyard.drills.model.Worded;

class DrillSchemaTest {
    private static final JsonNode SCHEMA = SchemaCheck.schema();

    @ParameterizedTest
    @EnumSource(Keys.class)
    void schema_ofEachMap_listsTheKeysOfTheReader(Keys keys) {
        JsonNode map = keys == Keys.DRILL ? SCHEMA : definition(name(keys));
        assertThat(fields(map.path("properties"))).containsExactlyInAnyOrderElementsOf(keys.words());
        assertThat(map.path("additionalProperties").asBoolean(true))
                .as("closed")
                .isFalse();
    }

    @Test
    void schema_hasNoMapThatTheReaderDoesNotKnow() {
        Set<String> maps = new TreeSet<>();
        SCHEMA.path("$defs").properties().forEach(entry -> {
            if (entry.getValue().has("properties")) {
                maps.add(entry.getKey());
            }
        });
        List<String> known = new ArrayList<>();
        for (Keys keys : Keys.values()) {
            known.add(name(keys));
        }
        known.remove(name(Keys.DRILL));
        assertThat(maps).containsExactlyInAnyOrderElementsOf(known);
    }

    @Test
    void schema_ofEachProperty_isDescribed() {
        for (Keys keys : Keys.values()) {
            JsonNode properties = (keys == Keys.DRILL ? SCHEMA : definition(name(keys))).path("properties");
            properties
                    .properties()
                    .forEach(entry -> assertThat(
                                    entry.getValue().path("description").asText())
                            .as("%s of %s", entry.getKey(), keys)
                            .isNotBlank());
        }
    }

    @Test
    void schema_ofEachWord_listsTheWordsOfTheModel() {
        assertWords("pool", "method", Pool.Method.values());
        assertWords("pool", "count", Pool.Count.values());
        assertWords("pool", "weights", Pool.Weights.values());
        assertWords("cue", "method", Pool.Method.values());
        assertWords("hash", "table", Hashing.Table.values());
        assertWords("delay", "candidates", Delay.Candidates.values());
        assertWords("affinity", "by", Affinity.By.values());
        assertWords("front", "kind", Front.Kind.values());
        assertWords("pool", "forwarded", Forwarded.values());
        assertWords("time", "order", Trace.Order.values());
        assertWords("probe", "kind", Probe.Kind.values());
        assertWords("traffic", "arrivals", Traffic.Arrivals.values());
        assertWords("expectation", "measure", Measure.values());
        assertWords("expectation", "until", Standing.values());
        JsonNode cause = definition("expectation").path("properties").path("cause");
        assertThat(texts(cause.path("oneOf").path(0).path("enum"))).containsExactlyElementsOf(words(Cause.values()));
    }

    @ParameterizedTest
    @MethodSource("steelyard.drills.read.DrillLibrary#names")
    void schema_ofABundledDrill_passes(String name) {
        assertThat(SchemaCheck.complaints(DrillLibrary.text(name).orElseThrow()))
                .isEmpty();
    }

    private static void assertWords(String definition, String key, Worded[] constants) {
        JsonNode words = definition(definition).path("properties").path(key).path("enum");
        assertThat(texts(words)).as(key).containsExactlyInAnyOrderElementsOf(words(constants));
    }

    private static List<String> words(Worded[] constants) {
        return Stream.of(constants).map(Worded::word).toList();
    }

    private static List<String> texts(JsonNode list) {
        List<String> texts = new ArrayList<>();
        list.forEach(one -> texts.add(one.asText()));
        return texts;
    }

    private static String name(Keys keys) {
        return keys.name().toLowerCase(Locale.ROOT).replace('_', '-');
    }

    private static JsonNode definition(String name) {
        return SCHEMA.path("$defs").path(name);
    }

    private static List<String> fields(JsonNode object) {
        List<String> names = new ArrayList<>();
        object.fieldNames().forEachRemaining(names::add);
        return names;
    }
}
