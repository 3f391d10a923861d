package steelyard.drills.read;

import java.nio.file.Path;
import java.util.List;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Serves;
import steelyard.drills.model.Trace;

/** Reads {@code time:}, the law of service times. */
final class TimeReader {
    static final Serves.Time HARMLESS = Serves.Time.fixed(Durations.MILLISECOND);

    private static final List<String> OF_TRACES = List.of("column", "order");
    private static final Quantity<Double> SHAPE =
            Numbers.NUMBER.that(n -> n >= 0.01 && n <= 10_000, "is out of range", "write a number from 0.01 to 10000");
    private static final Quantity<Trace.Order> ORDER = Words.of("an order", Trace.Order.values());
    private static final Quantity<String> COLUMN = Names.some("the head of a column", "took");

    private final Problems problems;
    private final TraceFiles traces;

    /** With the folder that trace files begin at, or null where there is none to begin at. */
    TimeReader(Problems problems, @Nullable Path folder) {
        this.problems = problems;
        this.traces = new TraceFiles(problems, folder);
    }

    /** The law behind {@code time:}; null when there is none. */
    Serves.@Nullable Time read(Fields serves) {
        Node node = serves.node("time");
        if (node == null) {
            return null;
        }
        if (node instanceof Node.Scalar) {
            return Serves.Time.fixed(serves.read("time", Durations.POSITIVE, Durations.MILLISECOND));
        }
        Fields fields = Fields.open(node, Keys.TIME, problems);
        List<String> laws =
                fields.given().stream().filter(key -> !OF_TRACES.contains(key)).toList();
        if (laws.size() != 1) {
            if (!fields.odd()) {
                problems.add(
                        node.place(), "a time follows one law", "write fixed, exponential, lognormal, gamma or trace");
            }
            return HARMLESS;
        }
        checkOfTraces(fields, laws.get(0));
        return switch (laws.get(0)) {
            case "fixed" -> Serves.Time.fixed(fields.read("fixed", Durations.POSITIVE, Durations.MILLISECOND));
            case "exponential" ->
                Serves.Time.exponential(fields.read("exponential", Durations.POSITIVE, Durations.MILLISECOND));
            case "gamma" -> gamma(fields.map("gamma", Keys.GAMMA));
            case "trace" -> trace(fields);
            default -> lognormal(fields.map("lognormal", Keys.LOGNORMAL));
        };
    }

    private void checkOfTraces(Fields fields, String law) {
        for (String key : OF_TRACES) {
            if (fields.has(key) && !law.equals("trace")) {
                problems.add(fields.keyPlace(key), key + " is of a trace", "leave it out, or write trace");
            }
        }
    }

    private static Serves.Time gamma(Fields fields) {
        return Serves.Time.gamma(
                fields.need("mean", Durations.POSITIVE, Durations.MILLISECOND), fields.need("shape", SHAPE, 1.0));
    }

    private Serves.Time trace(Fields fields) {
        String file = fields.read("trace", Names.FILE);
        String column = fields.read("column", COLUMN);
        Trace.Order order = fields.read("order", ORDER, Trace.Order.SAMPLED);
        Trace.Nanos nanos = file == null ? null : traces.read(fields, file, column);
        return file == null || nanos == null ? HARMLESS : Serves.Time.trace(new Trace(file, column, order, nanos));
    }

    private Serves.Time lognormal(Fields fields) {
        long median = fields.need("median", Durations.POSITIVE, 1L);
        long p99 = fields.need("99%", Durations.POSITIVE, Durations.DAY + 1);
        if (p99 <= median) {
            problems.add(
                    fields.valuePlace("99%"),
                    "the 99 % quantile is not above the median",
                    "write more than " + Durations.text(median));
            return HARMLESS;
        }
        return Serves.Time.lognormal(median, p99);
    }
}
