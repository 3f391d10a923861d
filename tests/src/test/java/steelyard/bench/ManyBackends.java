package steelyard.bench;

import static steelyard.bench.Forwarding.median;
import static steelyard.bench.Forwarding.say;

import java.util.ArrayList;
import java.util.EnumMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import steelyard.balancer.live.Balancer;
import steelyard.balancer.settings.HashSettings;
import steelyard.balancer.settings.PickSettings;
import steelyard.balancer.settings.PoolSettings.Method;

/**
 * Every method before a thousand backends, beside round robin in the same run: pairs of short turns, one of round robin and
 * one of the method, and the median of their ratios.
 */
final class ManyBackends {
    private static final int BACKENDS = 1_000;
    private static final int PAIRS = 9;
    private static final double WARM_SECONDS = 2;
    private static final double TURN_SECONDS = 0.5;
    private static final String THREADS = "steelyard-balancer";

    private ManyBackends() {}

    static void measure() throws Exception {
        say("");
        say("%-22s %12s %10s %20s", "1,000 backends", "requests/s", "p99 ms", "ratio to round robin");
        double least = Double.MAX_VALUE;
        try (QuickBackend backend = new QuickBackend();
                ClosedLoop clients = new ClosedLoop();
                Balancer turns = Middles.many(backend.address(), PickSettings.of(Method.ROUND_ROBIN), BACKENDS)) {
            clients.play(turns.frontAddress(0), THREADS, WARM_SECONDS);
            for (Method method : Method.values()) {
                try (Balancer balancer = Middles.many(backend.address(), settings(method), BACKENDS)) {
                    least = Math.min(least, compare(method, clients, turns, balancer));
                }
            }
        }
        say("");
        say("least-ratio-to-round-robin: %.2f", least);
    }

    private static PickSettings settings(Method method) {
        return PickSettings.of(method)
                .with(new HashSettings(HashSettings.By.PATH, "", HashSettings.Table.RING, 100, 65_537, 0));
    }

    private static double compare(Method method, ClosedLoop clients, Balancer turns, Balancer balancer)
            throws Exception {
        clients.play(balancer.frontAddress(0), THREADS, WARM_SECONDS);
        List<Stretch> stretches = new ArrayList<>();
        List<Double> ratios = new ArrayList<>();
        for (int pair = 0; pair < PAIRS; pair++) {
            Map<Way, Stretch> both = new EnumMap<>(Way.class);
            for (Way way : pair % 2 == 0 ? List.of(Way.TURNS, Way.METHOD) : List.of(Way.METHOD, Way.TURNS)) {
                Balancer middle = way == Way.TURNS ? turns : balancer;
                both.put(way, clients.play(middle.frontAddress(0), THREADS, TURN_SECONDS));
            }
            stretches.add(both.get(Way.METHOD));
            ratios.add(both.get(Way.METHOD).perSecond() / both.get(Way.TURNS).perSecond());
        }
        ratios.sort(null);
        double ratio = ratios.get(PAIRS / 2);
        say(
                "%-22s %12.0f %10.2f %20.2f",
                method.name().toLowerCase(Locale.ROOT).replace('_', '-'),
                median(stretches, Stretch::perSecond),
                median(stretches, Stretch::p99Millis),
                ratio);
        return ratio;
    }

    private enum Way {
        TURNS,
        METHOD
    }
}
