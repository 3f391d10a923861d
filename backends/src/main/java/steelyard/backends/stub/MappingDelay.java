package steelyard.backends.stub;

import com.fasterxml.jackson.databind.JsonNode;
import com.fasterxml.jackson.databind.node.ObjectNode;
import org.jspecify.annotations.Nullable;
import steelyard.backends.behave.RouteDelay;
import steelyard.backends.behave.RouteDelay.Law;

/** Takes the delays out of a mapping's response: fixed and drawn ones add up, as they do in the mapping's own words. */
final class MappingDelay {

    private static final double NANOS_PER_MILLI = 1e6;

    private MappingDelay() {}

    /** @throws IllegalArgumentException with one line that says what is wrong */
    static RouteDelay takeFrom(ObjectNode response) {
        double fixedNanos = nanos(response.remove("fixedDelayMilliseconds"));
        JsonNode dribble = response.remove("chunkedDribbleDelay");
        if (dribble != null) {
            // The answer is sent in one piece once the time that its pieces would take is over.
            fixedNanos += nanos(dribble.get("totalDuration"));
        }
        JsonNode spread = response.remove("delayDistribution");
        if (spread == null || spread.isNull()) {
            return fixed(fixedNanos);
        }
        return spread(fixedNanos, spread);
    }

    private static RouteDelay spread(double fixedNanos, JsonNode spread) {
        String type = spread.path("type").asText();
        return switch (type) {
            case "fixed" -> fixed(fixedNanos + nanos(spread.get("milliseconds")));
            case "uniform" ->
                new RouteDelay(
                        Math.round(fixedNanos), Law.UNIFORM, nanos(spread.get("lower")), nanos(spread.get("upper")));
            case "lognormal" ->
                new RouteDelay(
                        Math.round(fixedNanos),
                        Law.LOGNORMAL,
                        nanos(spread.get("median")),
                        number(spread.get("sigma")));
            default -> throw new IllegalArgumentException("unknown distribution '" + type + "'");
        };
    }

    private static RouteDelay fixed(double nanos) {
        return new RouteDelay(Math.round(nanos), Law.NONE, 0, 0);
    }

    private static double nanos(@Nullable JsonNode millis) {
        return number(millis) * NANOS_PER_MILLI;
    }

    private static double number(@Nullable JsonNode node) {
        if (node == null || node.isNull()) {
            return 0;
        }
        if (!node.isNumber()) {
            throw new IllegalArgumentException("expected a number, but got " + node);
        }
        return node.doubleValue();
    }
}
