package steelyard.harness.judge;

import java.util.Set;
import steelyard.harness.record.Cast;
import steelyard.harness.record.Sample;
import steelyard.harness.record.Slice;

/**
 * {@code shifted-in}: from the cue to the first instant after which, up to the member's next cue, its share of its
 * pool's attempts is at most 1 % in every second. A second begins each 100 ms from the cue; one without attempts holds.
 */
final class ShiftedIn extends SinceCue {
    private static final int HUNDRED = 100;
    private final Seconds[] seconds;

    ShiftedIn(String after, int[] members, Cast cast) {
        super(after, members, cast);
        seconds = new Seconds[members.length];
        for (int member = 0; member < members.length; member++) {
            seconds[member] = new Seconds();
        }
    }

    @Override
    Set<Hears> hears() {
        return Set.of(Hears.CUES, Hears.PICKS, Hears.SAMPLES);
    }

    @Override
    void begin() {
        for (Seconds each : seconds) {
            each.begin(beginNanos());
        }
    }

    @Override
    public void attemptPicked(long atNanos, int pool, int backend, long request, int attempt, int inFlight) {
        for (int member = 0; member < members(); member++) {
            if (cast().poolOf(backend(member)) == pool && running(backend(member)) >= 0) {
                seconds[member].picked(atNanos, backend == backend(member));
            }
        }
    }

    @Override
    public void sampled(long atNanos, Sample sample) {
        for (int member = 0; member < members(); member++) {
            if (running(backend(member)) >= 0) {
                seconds[member].advance(atNanos);
            }
        }
    }

    @Override
    void close(int member, long atNanos) {
        seconds[member].advance(atNanos);
    }

    @Override
    Reading member(int member) {
        Seconds each = seconds[member];
        if (each.told == 0) {
            return Reading.notMeasured(name(member) + " had its next cue, or the play its end, within 1 s");
        }
        if (!each.any) {
            return Reading.notMeasured("nothing was picked for its pool");
        }
        return each.held < each.told
                ? Reading.of((double) each.held * Slice.NANOS)
                : Reading.never(name(member) + " still took more than 1 % at its next cue or the end");
    }

    /** The seconds of one member. */
    private static final class Seconds extends SlidingSecond {
        private static final int OWN = 0;
        private static final int ALL = 1;

        /** Seconds told, and the first of those that have all held since. */
        private int told;

        private int held;
        private boolean any;

        Seconds() {
            super(2);
        }

        void picked(long atNanos, boolean own) {
            advance(atNanos);
            any = true;
            add(ALL);
            if (own) {
                add(OWN);
            }
        }

        @Override
        void secondEnds(int number) {
            told = number + 1;
            if (sum(OWN) * HUNDRED > sum(ALL)) {
                held = told;
            }
        }
    }
}
