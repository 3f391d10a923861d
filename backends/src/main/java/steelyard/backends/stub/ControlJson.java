package steelyard.backends.stub;

import com.fasterxml.jackson.annotation.JsonSubTypes;
import com.fasterxml.jackson.annotation.JsonTypeInfo;
import com.fasterxml.jackson.core.JsonProcessingException;
import com.fasterxml.jackson.databind.DeserializationFeature;
import com.fasterxml.jackson.databind.ObjectMapper;
import com.fasterxml.jackson.databind.json.JsonMapper;
import java.io.IOException;
import steelyard.backends.behave.Change;
import steelyard.backends.behave.Figures;

/** Changes and figures as JSON. A change names its kind in {@code "kind"}; everything else is named as in its record. */
final class ControlJson {

    private static final ObjectMapper JSON = JsonMapper.builder()
            .addMixIn(Change.class, KindFirst.class)
            .enable(DeserializationFeature.FAIL_ON_MISSING_CREATOR_PROPERTIES)
            .enable(DeserializationFeature.FAIL_ON_NULL_FOR_PRIMITIVES)
            .enable(DeserializationFeature.FAIL_ON_TRAILING_TOKENS)
            .build();

    private ControlJson() {}

    /** Keeps the names of a wire format out of the pure package. */
    @JsonTypeInfo(use = JsonTypeInfo.Id.NAME, property = "kind")
    @JsonSubTypes({
        @JsonSubTypes.Type(value = Change.Slow.class, name = "SLOW"),
        @JsonSubTypes.Type(value = Change.Fail.class, name = "FAIL"),
        @JsonSubTypes.Type(value = Change.Hang.class, name = "HANG"),
        @JsonSubTypes.Type(value = Change.Refuse.class, name = "REFUSE"),
        @JsonSubTypes.Type(value = Change.Kill.class, name = "KILL"),
        @JsonSubTypes.Type(value = Change.Revive.class, name = "REVIVE"),
        @JsonSubTypes.Type(value = Change.FailProbe.class, name = "FAIL_PROBE"),
        @JsonSubTypes.Type(value = Change.FlapProbe.class, name = "FLAP_PROBE"),
        @JsonSubTypes.Type(value = Change.Load.class, name = "LOAD"),
        @JsonSubTypes.Type(value = Change.Fill.class, name = "FILL"),
        @JsonSubTypes.Type(value = Change.Heal.class, name = "HEAL")
    })
    private interface KindFirst {}

    /** The answer to a change that was applied. */
    record Applied(long atNanos) {}

    /** The answer to whatever was not done. */
    record Problem(String problem) {}

    static byte[] write(Object value) {
        try {
            return JSON.writeValueAsBytes(value);
        } catch (JsonProcessingException impossible) {
            throw new IllegalStateException("a record of numbers and names cannot fail to be written", impossible);
        }
    }

    /** @throws IllegalArgumentException with one line that says what is wrong */
    static Change readChange(byte[] json) {
        return read(json, Change.class);
    }

    /** @throws IllegalArgumentException with one line that says what is wrong */
    static Figures readFigures(byte[] json) {
        return read(json, Figures.class);
    }

    /** @throws IllegalArgumentException with one line that says what is wrong */
    static <T> T read(byte[] json, Class<T> type) {
        T value;
        try {
            value = JSON.readValue(json, type);
        } catch (JsonProcessingException bad) {
            throw new IllegalArgumentException(firstLine(bad.getOriginalMessage()), bad);
        } catch (IOException impossible) {
            throw new IllegalStateException("bytes in memory cannot fail to be read", impossible);
        }
        if (value == null) {
            throw new IllegalArgumentException("expected an object, but got null");
        }
        return value;
    }

    private static String firstLine(String text) {
        return text.lines().findFirst().orElse("not JSON");
    }
}
