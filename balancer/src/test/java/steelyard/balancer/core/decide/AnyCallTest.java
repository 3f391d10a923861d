package steelyard.balancer.core.decide;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.ArrayList;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import java.util.SplittableRandom;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import steelyard.balancer.core.pick.Keys;
import steelyard.balancer.core.standing.Standing;
import steelyard.balancer.settings.AffinitySettings;
import steelyard.balancer.settings.BenchSettings;
import steelyard.balancer.settings.LoadSettings;
import steelyard.balancer.settings.PoolSettings.Method;
import steelyard.balancer.settings.ProbeSettings;

/** Any call in any order, with every rule of a pool set at once; what must hold is looked at after each. */
class AnyCallTest {
    private static final int MEMBERS = 6;
    private static final int MOST = 3;
    private static final int STEPS = 8_000;

    @ParameterizedTest
    @CsvSource({
        // method, by what clients are held, origin
        "ROUND_ROBIN,          COOKIE, 0",
        "WEIGHTED_ROUND_ROBIN, CLIENT, -1",
        "STRIDE,               COOKIE, 9223372036854755807",
        "RANDOM,               CLIENT, -9223372036854775808",
        "WEIGHTED_RANDOM,      COOKIE, 9223372036854775807",
        "LEAST_CONNECTIONS,    CLIENT, 9223372036854755807",
        "TWO_CHOICES,          COOKIE, -9223372036854775808",
        "JOIN_IDLE_QUEUE,      CLIENT, 9223372036854755807",
        "EXPECTED_DELAY,       COOKIE, -20000",
        "HASH,                 CLIENT, 9223372036854755807",
    })
    void anyCall_withEveryRuleSet_keepsTheInvariants(Method method, AffinitySettings.By by, long origin) {
        new Play(method, by, origin).run();
    }

    /** One play: the Decider, and what a bystander knows of it. */
    private static final class Play implements DecisionSink, Orders {
        final SplittableRandom random = new SplittableRandom(23);
        final Decider decider;
        final int[] inFlight = new int[MEMBERS];
        final long[] probe = new long[MEMBERS];
        final long[] reading = new long[MEMBERS];
        /** What is in flight, as (request, backend); what waits, and what has been answered to it. */
        final List<long[]> flights = new ArrayList<>();

        final Map<Long, Integer> waiting = new HashMap<>();
        final Ask ask = new Ask();
        long now;
        long request;
        int picks;
        int waits;
        int benches;

        Play(Method method, AffinitySettings.By by, long origin) {
            now = origin;
            LoadSettings load =
                    new LoadSettings("/load", 150, 60, 400, 0.1, List.of(new LoadSettings.Gauge("cpu", 0.8, 1)));
            Stand stand = Stand.of(method, MEMBERS)
                    .standingBy(2)
                    .reserve(0.3, 0.6)
                    .probe(new ProbeSettings(null, 300, 100, 2, 2, 0.2))
                    .warmUp(900, 0.1)
                    .bench(new BenchSettings(3, 0.6, 200, 5, 100, 1_000, 500, 0.4))
                    .inFlight(MOST, 4, 60)
                    .affinity(by)
                    .keepingClients()
                    .retry(Stand.RETRY)
                    .load(load);
            decider = new Decider(
                    Stand.settings(stand), (draw, a, b) -> Keys.of(Keys.of(draw.ordinal(), a), b), this, this, now);
        }

        void run() {
            for (int step = 0; step < STEPS; step++) {
                now += random.nextInt(8);
                // A driver polls before it does anything else at an instant.
                decider.poll(now);
                act(random.nextInt(MEMBERS));
                look();
            }
            assertThat(picks).isGreaterThan(STEPS / 10);
            assertThat(waits).isPositive();
            assertThat(benches).isPositive();
        }

        private void act(int backend) {
            switch (random.nextInt(20)) {
                case 0 -> decider.drain(backend, 50, now);
                case 1 -> decider.withdraw(backend, now);
                case 2, 3, 4 -> decider.admit(backend, now);
                case 5 -> decider.reweigh(backend, random.nextInt(4), now);
                case 6, 7 -> decider.probeAnswered(backend, probe[backend], random.nextInt(4) > 0, now);
                case 8, 9 -> decider.read(backend, reading[backend], gauges(), now);
                case 10 -> {
                    if (!waiting.isEmpty()) {
                        long ticket = waiting.keySet().iterator().next();
                        assertThat(decider.leave(ticket, now)).isTrue();
                        waiting.remove(ticket);
                    }
                }
                case 11, 12, 13, 14 -> end();
                default -> pick(backend);
            }
        }

        private double[] gauges() {
            return new double[] {random.nextInt(10) == 0 ? Double.NaN : random.nextDouble()};
        }

        private void end() {
            if (flights.isEmpty()) {
                return;
            }
            long[] flight = flights.remove(random.nextInt(flights.size()));
            Outcome outcome = Outcome.values()[random.nextInt(Outcome.values().length)];
            inFlight[(int) flight[1]]--;
            decider.ended((int) flight[1], flight[0], 1, outcome, outcome == Outcome.ANSWERED ? 200 : 0, now);
        }

        private void pick(int backend) {
            ask.clear();
            ask.request = request++;
            ask.key = Keys.of(random.nextInt(50), 0);
            ask.client = Keys.of(random.nextInt(50), 1);
            ask.held = random.nextInt(3) == 0 ? random.nextInt(-3, MEMBERS + 3) : Decider.NOBODY;
            ask.pinned = random.nextInt(5) == 0 ? backend : Decider.NOBODY;
            ask.ticket = ask.request;
            if (random.nextInt(8) == 0) {
                ask.again(backend);
            }
            int picked = decider.pick(ask, now);
            if (picked == Decider.WAITING) {
                waiting.put(ask.ticket, backend);
                waits++;
            } else if (picked != Decider.NOBODY) {
                assertThat(ask.tried(picked)).isFalse();
                took(ask.request, picked);
            }
        }

        private void took(long of, int backend) {
            flights.add(new long[] {of, backend});
        }

        private void look() {
            double shares = 0;
            int sum = 0;
            int benched = 0;
            boolean anyOpen = false;
            for (int backend = 0; backend < MEMBERS; backend++) {
                assertThat(decider.inFlight(backend))
                        .isEqualTo(inFlight[backend])
                        .isBetween(0, MOST);
                sum += inFlight[backend];
                double share = decider.entitledShare(backend, now);
                assertThat(share == 0 || decider.pickable(backend)).isTrue();
                assertThat(decider.headroom(backend)).isBetween(100, 1000);
                shares += share;
                anyOpen |= decider.pickable(backend) && decider.effectiveWeight(backend, now) > 0;
                benched += decider.standing(backend) == Standing.BENCHED ? 1 : 0;
                boolean byHand = decider.standing(backend) == Standing.DRAINING
                        || decider.standing(backend) == Standing.WITHDRAWN;
                assertThat(byHand && decider.pickable(backend)).isFalse();
            }
            assertThat(flights).hasSize(sum);
            assertThat(shares).isBetween(anyOpen ? 1 - 1e-9 : 0, anyOpen ? 1 + 1e-9 : 0);
            assertThat(benched).isLessThanOrEqualTo(2);
            assertThat(decider.waiting(0)).isEqualTo(waiting.size()).isLessThanOrEqualTo(4);
            benches += benched;
            assertThat(decider.nextDeadlineNanos() - now).isNotNegative();
        }

        @Override
        public void picked(long nowNanos, int pool, int backend, long of, int attempt, int count) {
            // Draining ones go on serving clients that are held to them; all others must be open.
            assertThat(decider.pickable(backend) || decider.standing(backend) == Standing.DRAINING)
                    .isTrue();
            assertThat(count).isEqualTo(++inFlight[backend]).isLessThanOrEqualTo(MOST);
            picks++;
        }

        @Override
        public void place(long ticket, int backend) {
            assertThat(waiting.remove(ticket)).as("ticket %d waits", ticket).isNotNull();
            if (backend != Decider.NOBODY) {
                took(ticket, backend);
            }
        }

        @Override
        public void startProbe(int backend, long number) {
            probe[backend] = number;
        }

        @Override
        public void dropProbe(int backend, long number) {}

        @Override
        public void startReading(int backend, long number) {
            reading[backend] = number;
        }

        @Override
        public void dropReading(int backend, long number) {}

        @Override
        public void cut(int backend) {}
    }
}
