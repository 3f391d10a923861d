package steelyard.balancer.core.pick;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.Arrays;
import java.util.Random;
import java.util.stream.IntStream;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

/**
 * Weighted round robin, over backends and over hosts, against the same rule written as plain walks over the list, under
 * random returns, departures, changes of weight and retries.
 */
class PlainTurnsTest {
    private static final int STEPS = 4_000;
    private static final int MOST_WEIGHT = 4;

    @ParameterizedTest
    @ValueSource(longs = {1, 2, 3, 4, 5})
    void pick_ofBackendsUnderRandomChanges_isThatOfThePlainRule(long seed) {
        Random random = new Random(seed);
        int members = 1 + random.nextInt(7);
        Picker picker = new WeightedRoundRobin(members, Ramp.NONE);
        Plain plain = new Plain(members);
        for (int step = 0; step < STEPS; step++) {
            int member = random.nextInt(members);
            switch (random.nextInt(10)) {
                case 0 -> {
                    picker.leave(member);
                    plain.in[member] = false;
                }
                case 1, 2 -> {
                    picker.enter(member);
                    plain.enter(member, plain.open(-1));
                }
                case 3 -> {
                    int weight = random.nextInt(MOST_WEIGHT + 1);
                    picker.weigh(member, (long) weight * Picker.MILLI);
                    plain.weigh(member, weight, plain.open(-1));
                }
                default -> {
                    int tried = random.nextInt(3) == 0 ? member : -1;
                    int picked = picker.pick(0, 1, 0, new int[] {tried}, tried < 0 ? 0 : 1, step);
                    assertThat(picked).as("step %d", step).isEqualTo(plain.pick(plain.open(tried)));
                }
            }
        }
    }

    /** Two pools; the first has a backend on every host, the second on all but the first host. */
    @ParameterizedTest
    @ValueSource(longs = {1, 2, 3, 4, 5})
    void pick_ofSharedHostsUnderRandomChanges_isThatOfThePlainRule(long seed) {
        Random random = new Random(seed);
        int hosts = 2 + random.nextInt(5);
        HostPlaces places = new HostPlaces(new int[hosts]);
        Plain plain = new Plain(hosts);
        for (int host = 0; host < hosts; host++) {
            places.weigh(host, 1);
        }
        boolean[][] there = new boolean[2][hosts];
        Picker[] pools = {
            new HostTurns(places, range(0, hosts), Ramp.NONE), new HostTurns(places, range(1, hosts), Ramp.NONE)
        };
        for (int host = 0; host < hosts; host++) {
            plain.place[host] = 1L << Plain.CYCLE; // weight 0 at first: no turn in the cycle that was
        }
        for (int step = 0; step < STEPS; step++) {
            int pool = random.nextInt(2);
            int host = pool + random.nextInt(hosts - pool);
            switch (random.nextInt(10)) {
                case 0 -> {
                    pools[pool].leave(host - pool);
                    there[pool][host] = false;
                }
                case 1, 2 -> {
                    boolean was = there[pool][host];
                    pools[pool].enter(host - pool);
                    there[pool][host] = true;
                    if (!was && plain.weight[host] > 0) {
                        plain.join(host, plain.weighing(there[pool]));
                    }
                }
                case 3 -> {
                    int weight = 1 + random.nextInt(MOST_WEIGHT);
                    places.weigh(host, weight);
                    plain.reweigh(host, weight);
                    for (boolean[] at : there) {
                        if (at[host]) {
                            plain.join(host, plain.weighing(at));
                        }
                    }
                }
                default -> {
                    int picked = pools[pool].pick(0, 1, 0, new int[0], 0, step);
                    int expected = plain.pick(plain.weighing(there[pool]));
                    assertThat(picked < 0 ? picked : picked + pool)
                            .as("step %d", step)
                            .isEqualTo(expected);
                }
            }
        }
    }

    private static int[] range(int from, int to) {
        return IntStream.range(from, to).toArray();
    }

    /** The rule as it is written: places (cycle, turn), smallest first, ties in list order. */
    private static final class Plain {
        static final int CYCLE = 32;
        final long[] place;
        final int[] weight;
        final boolean[] in;

        Plain(int members) {
            place = new long[members];
            weight = new int[members];
            in = new boolean[members];
            Arrays.fill(weight, 1);
        }

        /** Who may be picked, but for one. */
        boolean[] open(int but) {
            boolean[] open = weighing(in);
            if (but >= 0) {
                open[but] = false;
            }
            return open;
        }

        boolean[] weighing(boolean[] there) {
            boolean[] open = there.clone();
            for (int member = 0; member < open.length; member++) {
                open[member] &= weight[member] > 0;
            }
            return open;
        }

        int first(boolean[] open) {
            int first = -1;
            for (int member = 0; member < open.length; member++) {
                if (open[member] && (first < 0 || place[member] < place[first])) {
                    first = member;
                }
            }
            return first;
        }

        int pick(boolean[] open) {
            int first = first(open);
            if (first >= 0) {
                place[first]++;
                settle(first);
            }
            return first;
        }

        void enter(int member, boolean[] open) {
            if (!in[member] && weight[member] > 0) {
                join(member, open);
            }
            in[member] = true;
        }

        void weigh(int member, int newWeight, boolean[] open) {
            if (weight[member] == newWeight) {
                return;
            }
            reweigh(member, newWeight);
            if (in[member] && newWeight > 0) {
                join(member, open);
            }
        }

        void reweigh(int member, int newWeight) {
            weight[member] = newWeight;
            settle(member);
        }

        void join(int member, boolean[] open) {
            open[member] = false;
            int first = first(open);
            if (first >= 0 && place[member] < place[first]) {
                place[member] = place[first];
                settle(member);
            }
        }

        private void settle(int member) {
            long cycle = place[member] >> CYCLE;
            long turn = place[member] - (cycle << CYCLE);
            if (turn >= weight[member]) {
                place[member] = (cycle + 1) << CYCLE;
            }
        }
    }
}
