package steelyard.bench;

import static steelyard.bench.Forwarding.say;

import java.net.InetSocketAddress;
import java.util.LinkedHashMap;
import java.util.Map;
import org.HdrHistogram.Histogram;

/**
 * Latency at half of the relay's peak load, from when a request was due: direct, through the relay and through the balancer,
 * in short turns. Compared is what each adds to direct.
 */
final class HalfLoad {
    private static final int TURNS = 8;
    private static final double TURN_SECONDS = 1.5;

    private HalfLoad() {}

    static void measure(double perSecond, InetSocketAddress direct, InetSocketAddress relay, InetSocketAddress balancer)
            throws Exception {
        Map<String, InetSocketAddress> targets = new LinkedHashMap<>();
        targets.put("direct", direct);
        targets.put("relay", relay);
        targets.put("balancer", balancer);
        Map<String, Histogram> latencies = new LinkedHashMap<>();
        try (PacedLoop clients = new PacedLoop()) {
            for (int turn = 0; turn < TURNS; turn++) {
                for (Map.Entry<String, InetSocketAddress> target : targets.entrySet()) {
                    Histogram seen = clients.play(target.getValue(), perSecond, TURN_SECONDS);
                    if (turn > 0) { // the first one warms up
                        latencies.merge(target.getKey(), seen, HalfLoad::both);
                    }
                }
            }
        }
        say("");
        say("%-10s %12s %10s %10s", "half load", "requests/s", "p50 us", "p99 us");
        latencies.forEach((way, seen) -> say(
                "%-10s %12.0f %10.0f %10.0f",
                way, seen.getTotalCount() / ((TURNS - 1) * TURN_SECONDS), at(seen, 50), at(seen, 99)));
        say("");
        say("added-p50-to-relay: %.2f", added(latencies, 50));
        say("added-p99-to-relay: %.2f", added(latencies, 99));
    }

    private static double added(Map<String, Histogram> latencies, double percentile) {
        double direct = at(latencies.get("direct"), percentile);
        return (at(latencies.get("balancer"), percentile) - direct) / (at(latencies.get("relay"), percentile) - direct);
    }

    private static double at(Histogram seen, double percentile) {
        return seen.getValueAtPercentile(percentile) / 1e3;
    }

    private static Histogram both(Histogram one, Histogram other) {
        one.add(other);
        return one;
    }
}
