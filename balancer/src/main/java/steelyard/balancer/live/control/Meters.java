package steelyard.balancer.live.control;

import io.micrometer.core.instrument.FunctionCounter;
import io.micrometer.core.instrument.Gauge;
import io.micrometer.core.instrument.Tags;
import io.micrometer.prometheusmetrics.PrometheusConfig;
import io.micrometer.prometheusmetrics.PrometheusMeterRegistry;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.function.DoubleSupplier;
import java.util.function.IntToLongFunction;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.core.standing.Standing;
import steelyard.balancer.live.guard.BackendReadings;
import steelyard.balancer.live.guard.GuardedDecider;
import steelyard.balancer.settings.BalancerSettings;
import steelyard.balancer.settings.HostSettings;
import steelyard.balancer.settings.PoolSettings;

/** The meters over {@link Counts} and over the present state of every backend. Used by one thread. */
final class Meters {
    static final String OPEN_METRICS = "application/openmetrics-text; version=1.0.0; charset=utf-8";

    /** What each meter says, by its name. */
    static final Map<String, String> HELP = Map.ofEntries(
            Map.entry("steelyard.host.reweighs", "Changes of the weight of a host"),
            Map.entry("steelyard.failed.handshakes", "Connections to the front of a pool whose TLS handshake failed"),
            Map.entry("steelyard.nobody", "Requests for which no backend could be picked"),
            Map.entry("steelyard.retries", "Retries asked for, by whether the budget granted them"),
            Map.entry("steelyard.picks", "Attempts picked for a backend"),
            Map.entry("steelyard.attempts", "Attempts that ended on a backend, by how"),
            Map.entry("steelyard.probes", "Probes of a backend, by answer"),
            Map.entry("steelyard.reweighs", "Changes of the set weight of a backend"),
            Map.entry("steelyard.transitions", "Changes of the standing of a backend, by the new one"),
            Map.entry("steelyard.standing", "1 for the standing that a backend has now, 0 for the others"),
            Map.entry("steelyard.in.flight", "Attempts in flight on a backend"),
            Map.entry("steelyard.waiting", "Requests that wait for a backend of a pool to be free"),
            Map.entry("steelyard.weight", "Set weight of a backend"),
            Map.entry("steelyard.headroom", "What load readings leave of the weight of a backend, from 0 to 1"),
            Map.entry(
                    "steelyard.effective.weight",
                    "Weight of a backend after warm-up and host weights; of one that may not be picked, if it came"
                            + " back alone"),
            Map.entry("steelyard.entitled.share", "Effective weight over the sum of those that may be picked"));

    private final GuardedDecider decider;
    private final Counts counts;
    private final Figures figures;
    private final BackendReadings readings;
    private final PrometheusMeterRegistry registry = new PrometheusMeterRegistry(PrometheusConfig.DEFAULT);

    /** @param failedHandshakes how many there were at the front of a pool, by its number; from any thread */
    Meters(BalancerSettings settings, GuardedDecider decider, Counts counts, IntToLongFunction failedHandshakes) {
        this.decider = decider;
        this.counts = counts;
        this.figures = new Figures(settings);
        this.readings =
                new BackendReadings(settings.backends().size(), settings.pools().size());
        int backend = 0;
        for (int pool = 0; pool < settings.pools().size(); pool++) {
            PoolSettings of = settings.pools().get(pool);
            int number = pool;
            pool(Tags.of("pool", of.name()), pool);
            if (of.front().tls() != null) {
                counter(
                        "steelyard.failed.handshakes",
                        Tags.of("pool", of.name()),
                        () -> failedHandshakes.applyAsLong(number));
            }
            for (var one : of.backends()) {
                backend(Tags.of("pool", of.name(), "backend", one.name()), backend);
                backend++;
            }
        }
        List<HostSettings> hosts = settings.hosts();
        for (int host = 0; host < hosts.size(); host++) {
            int number = host;
            counter(
                    "steelyard.host.reweighs",
                    Tags.of("host", hosts.get(host).name()),
                    () -> figures.hostReweighs[number]);
        }
    }

    /** The page: counts of one instant, readings of one a moment later. The lock is held only to copy them. */
    String page() {
        decider.change((unchanged, now) -> counts.copyTo(figures));
        decider.read(readings);
        return registry.scrape(OPEN_METRICS);
    }

    private void pool(Tags tags, int pool) {
        gauge("steelyard.waiting", tags, () -> readings.waiting(pool));
        counter("steelyard.nobody", tags, () -> figures.nobody[pool]);
        counter("steelyard.retries", tags.and("answer", "granted"), () -> figures.retriesGranted[pool]);
        counter("steelyard.retries", tags.and("answer", "denied"), () -> figures.retriesDenied[pool]);
    }

    private void backend(Tags tags, int backend) {
        counter("steelyard.picks", tags, () -> figures.picks[backend]);
        for (Outcome outcome : Outcome.values()) {
            int ordinal = outcome.ordinal();
            counter("steelyard.attempts", tags.and("outcome", word(outcome)), () -> figures.outcomes[backend][ordinal]);
        }
        counter("steelyard.probes", tags.and("answer", "passed"), () -> figures.probesPassed[backend]);
        counter("steelyard.probes", tags.and("answer", "missed"), () -> figures.probesMissed[backend]);
        counter("steelyard.reweighs", tags, () -> figures.reweighs[backend]);
        for (Standing standing : Standing.values()) {
            int ordinal = standing.ordinal();
            Tags stood = tags.and("standing", word(standing));
            counter("steelyard.transitions", stood, () -> figures.transitions[backend][ordinal]);
            gauge("steelyard.standing", stood, () -> readings.standing(backend) == standing ? 1 : 0);
        }
        gauge("steelyard.in.flight", tags, () -> readings.inFlight(backend));
        gauge("steelyard.weight", tags, () -> readings.weight(backend));
        gauge("steelyard.headroom", tags, () -> readings.headroom(backend));
        gauge("steelyard.effective.weight", tags, () -> readings.effectiveWeight(backend));
        gauge("steelyard.entitled.share", tags, () -> readings.entitledShare(backend));
    }

    /** The registry holds weakly what it reads from; {@code this} is held by the page. */
    private void counter(String name, Tags tags, DoubleSupplier value) {
        FunctionCounter.builder(name, this, held -> value.getAsDouble())
                .description(HELP.get(name))
                .tags(tags)
                .register(registry);
    }

    private void gauge(String name, Tags tags, DoubleSupplier value) {
        Gauge.builder(name, this, held -> value.getAsDouble())
                .description(HELP.get(name))
                .tags(tags)
                .register(registry);
    }

    private static String word(Enum<?> constant) {
        return constant.name().toLowerCase(Locale.ROOT);
    }
}
