package steelyard.bench;

import java.net.InetSocketAddress;
import java.util.ArrayList;
import java.util.EnumMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.function.ToDoubleFunction;
import steelyard.balancer.live.Balancer;

/**
 * Requests a second, p99 and CPU time a request: straight to a backend, through a bare byte relay, and through the
 * balancer.
 *
 * <p>32 clients in a closed loop over kept connections, answers of 512 bytes; client, middle and backend have one event
 * loop each. Five rounds; in each the three ways take short turns again and again, so that a slow spell of the machine
 * touches all of them alike; the table shows medians of the rounds. Then latencies at half of the relay's load, and every
 * method before a thousand backends.
 */
public final class Forwarding {
    private static final int ROUNDS = 5;
    private static final double WARM_SECONDS = 4;
    private static final int TURNS = 4;
    private static final double TURN_SECONDS = 0.75;

    private enum Way {
        DIRECT("direct", "bench-backend"),
        RELAY("relay", "bench-relay"),
        BALANCER("balancer", "steelyard-balancer");

        private final String word;
        private final String middleThreads;

        Way(String word, String middleThreads) {
            this.word = word;
            this.middleThreads = middleThreads;
        }
    }

    private Forwarding() {}

    /** The benchmark's entry; takes no arguments. */
    public static void main(String[] args) throws Exception {
        try (QuickBackend backend = new QuickBackend();
                ByteRelay relay = new ByteRelay(backend.address());
                Balancer balancer = Middles.three(backend.address());
                ClosedLoop clients = new ClosedLoop()) {
            Map<Way, InetSocketAddress> targets = Map.of(
                    Way.DIRECT, backend.address(),
                    Way.RELAY, relay.address(),
                    Way.BALANCER, balancer.frontAddress(0));
            for (Way way : Way.values()) {
                clients.play(targets.get(way), way.middleThreads, WARM_SECONDS);
            }
            Map<Way, List<Stretch>> rounds = new EnumMap<>(Way.class);
            for (int round = 0; round < ROUNDS; round++) {
                round(clients, targets)
                        .forEach((way, stretch) -> rounds.computeIfAbsent(way, w -> new ArrayList<>())
                                .add(stretch));
            }
            print(rounds);
            double relayRate = median(rounds.get(Way.RELAY), Stretch::perSecond);
            HalfLoad.measure(relayRate / 2, backend.address(), relay.address(), balancer.frontAddress(0));
        }
        ManyBackends.measure();
    }

    private static Map<Way, Stretch> round(ClosedLoop clients, Map<Way, InetSocketAddress> targets) throws Exception {
        Map<Way, Stretch> sums = new EnumMap<>(Way.class);
        for (int turn = 0; turn < TURNS; turn++) {
            for (Way way : Way.values()) {
                sums.merge(way, clients.play(targets.get(way), way.middleThreads, TURN_SECONDS), Stretch::with);
            }
        }
        return sums;
    }

    private static void print(Map<Way, List<Stretch>> rounds) {
        say("%-10s %12s %10s %18s %18s", "way", "requests/s", "p99 ms", "CPU us/request", "of it in middle");
        rounds.forEach((way, stretches) -> say(
                "%-10s %12.0f %10.2f %18.1f %18s",
                way.word,
                median(stretches, Stretch::perSecond),
                median(stretches, Stretch::p99Millis),
                median(stretches, Stretch::cpuMicros),
                way == Way.DIRECT
                        ? "-"
                        : String.format(Locale.ROOT, "%.1f", median(stretches, Stretch::middleMicros))));
        double balancer = median(rounds.get(Way.BALANCER), Stretch::perSecond);
        say("");
        say("ratio-to-direct: %.2f", balancer / median(rounds.get(Way.DIRECT), Stretch::perSecond));
        say("ratio-to-relay: %.2f", balancer / median(rounds.get(Way.RELAY), Stretch::perSecond));
    }

    static double median(List<Stretch> stretches, ToDoubleFunction<Stretch> figure) {
        double[] sorted = stretches.stream().mapToDouble(figure).sorted().toArray();
        return sorted[sorted.length / 2];
    }

    static void say(String format, Object... values) {
        System.out.println(String.format(Locale.ROOT, format, values));
    }
}
