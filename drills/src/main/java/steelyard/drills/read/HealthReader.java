package steelyard.drills.read;

import java.util.ArrayList;
import java.util.List;
import java.util.function.Supplier;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Bench;
import steelyard.drills.model.Health;
import steelyard.drills.model.LoadProbe;
import steelyard.drills.model.Probe;
import steelyard.drills.model.WarmUp;

/** Reads how a pool learns what state its backends are in: probe, warm-up, bench and load. */
final class HealthReader {
    private static final Quantity<Integer> FAILURES = Numbers.from(1, 1_000_000);
    private static final Quantity<Double> GAIN =
            Numbers.NUMBER.that(n -> n > 0 && n <= 100, "is out of range", "write a number above 0, at most 100");
    private static final Probe PROBE = new Probe(Probe.Kind.TCP, null, Durations.SECOND, Durations.SECOND, 1, 1);
    private static final WarmUp WARM_UP = new WarmUp(Durations.SECOND, 1);
    private static final double WARM_UP_FLOOR = 0.1;
    private static final int STALE_AFTER_READINGS = 3;

    private final Problems problems;
    private final ProbeReader probes;

    HealthReader(Problems problems) {
        this.problems = problems;
        this.probes = new ProbeReader(problems);
    }

    Health read(Fields pool) {
        return new Health(
                read(pool, "probe", PROBE, () -> probes.read(pool.map("probe", Keys.PROBE))),
                read(pool, "warm-up", WARM_UP, () -> warmUp(pool)),
                read(pool, "bench", Bench.USUAL, () -> bench(pool.map("bench", Keys.BENCH))),
                read(pool, "load", LoadProbe.USUAL, () -> load(pool.map("load", Keys.LOAD))));
    }

    /**
     * What is behind a key that may be left out. Where a key of the pool could not be read it may be this one,
     * misspelt; something harmless then stands in, so that nobody is told that the pool lacks it.
     */
    static <T> @Nullable T read(Fields pool, String key, T harmless, Supplier<T> reader) {
        return pool.has(key) ? reader.get() : pool.odd() ? harmless : null;
    }

    private static WarmUp warmUp(Fields pool) {
        if (pool.node("warm-up") instanceof Node.Scalar) {
            return new WarmUp(pool.read("warm-up", Durations.POSITIVE, Durations.SECOND), WARM_UP_FLOOR);
        }
        Fields fields = pool.map("warm-up", Keys.WARM_UP);
        return new WarmUp(
                fields.need("ramp", Durations.POSITIVE, Durations.SECOND),
                fields.read("floor", Shares.FLOOR, WARM_UP_FLOOR));
    }

    private Bench bench(Fields fields) {
        Bench usual = Bench.USUAL;
        double share = fields.read("share", Shares.ABOVE_ZERO, 0.0);
        for (String key : List.of("over", "least")) {
            if (fields.has(key) && !fields.has("share")) {
                problems.notice(
                        fields.keyPlace(key),
                        "'" + key + "' plays no part in a bench without share",
                        "write share: 50%, or leave it out");
            }
        }
        long time = fields.read("time", Durations.POSITIVE, usual.timeNanos());
        long most = fields.read("most", Durations.POSITIVE, Math.max(time, usual.mostNanos()));
        if (most < time) {
            problems.add(
                    fields.valuePlace("most"),
                    "the longest bench time is shorter than the first",
                    "write a most of at least " + Durations.text(time));
        }
        return new Bench(
                fields.read("after", FAILURES, usual.after()),
                share,
                fields.read("over", Durations.PERIOD, usual.overNanos()),
                fields.read("least", FAILURES, usual.least()),
                time,
                Math.max(time, most),
                fields.read("quiet", Durations.POSITIVE, usual.quietNanos()),
                fields.read("cap", Shares.ABOVE_ZERO, usual.cap()));
    }

    private LoadProbe load(Fields fields) {
        LoadProbe usual = LoadProbe.USUAL;
        long every = fields.read("every", Durations.PERIOD, usual.everyNanos());
        long within = fields.read("within", Durations.POSITIVE, usual.withinNanos());
        long stale = fields.read("stale-after", Durations.POSITIVE, STALE_AFTER_READINGS * every);
        probes.noticeLate(fields, "a reading", every, within);
        if (stale < every) {
            problems.notice(
                    fields.keyPlace("stale-after"),
                    "every reading is stale before the next comes",
                    "write at least " + Durations.text(every));
        }
        return new LoadProbe(
                fields.read("path", Paths.PATH, usual.path()),
                every,
                within,
                stale,
                fields.read("floor", Shares.FLOOR, usual.floor()),
                fields.read("cost", Durations.DURATION, usual.costNanos()),
                gauges(fields));
    }

    private List<LoadProbe.Gauge> gauges(Fields load) {
        List<LoadProbe.Gauge> gauges = new ArrayList<>();
        for (Node.Entry entry : load.gauges("gauges")) {
            if (entry.value() instanceof Node.Scalar) {
                Double ceiling = Shares.ABOVE_ZERO.read(entry.value(), entry.key(), problems);
                gauges.add(new LoadProbe.Gauge(entry.key(), ceiling == null ? 1 : ceiling, 1));
            } else {
                Fields fields = Fields.open(entry.value(), Keys.LOAD_GAUGE, problems);
                gauges.add(new LoadProbe.Gauge(
                        entry.key(), fields.read("ceiling", Shares.ABOVE_ZERO, 1.0), fields.read("gain", GAIN, 1.0)));
            }
        }
        if (load.has("gauges") && gauges.isEmpty()) {
            problems.add(load.valuePlace("gauges"), "load counts no gauge", "write gauges: {cpu: 80%}");
        }
        return gauges.isEmpty() ? LoadProbe.USUAL.gauges() : gauges;
    }
}
