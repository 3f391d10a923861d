package steelyard.balancer.core.decide;

import steelyard.balancer.core.pick.Tournament;

/** The next instant of each of several places, as of when it was last set, and the earliest of all. */
final class Deadlines {
    static final int NOBODY = Tournament.NOBODY;

    private final long[] nanos;
    private final Tournament tournament;

    Deadlines(int places) {
        nanos = new long[places];
        tournament = new Tournament(places, (place, other) -> nanos[place] - nanos[other] < 0);
    }

    void set(int place, long atNanos) {
        nanos[place] = atNanos;
        tournament.enter(place);
    }

    void clear(int place) {
        tournament.leave(place);
    }

    /** The place that is next, the first in order among equals, or {@link #NOBODY}. */
    int next() {
        return tournament.best();
    }

    /** When {@link #next} is; only while there is one. */
    long nextNanos() {
        return nanos[tournament.best()];
    }
}
