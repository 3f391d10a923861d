package steelyard.backends.behave;

import static org.assertj.core.api.Assertions.assertThat;
import static steelyard.backends.behave.Trace.MILLI;

/** A behaviour, its trace, and a clock that counts milliseconds from an origin. */
final class Play {
    final Trace trace;
    final Behaviour behaviour;
    private final long origin;
    private long tokens;

    Play(BehaviourSettings settings, long origin) {
        this.origin = origin;
        this.trace = new Trace(origin);
        this.behaviour = new Behaviour(3, settings, new Chance(7), origin);
    }

    int arrive(long request, long atMillis) {
        return behaviour.arrive(tokens++, request, 0, 0, at(atMillis), trace);
    }

    void probe(long probe, long atMillis) {
        behaviour.probe(-1 - probe, probe, at(atMillis), trace);
    }

    void read(long reading, long atMillis) {
        behaviour.read(-1 - reading, reading, at(atMillis), trace);
    }

    void apply(Change change, long atMillis) {
        behaviour.apply(change, at(atMillis), trace);
    }

    void poll(long atMillis) {
        behaviour.poll(at(atMillis), trace);
    }

    Figures figures(long atMillis) {
        return behaviour.figures(at(atMillis), trace);
    }

    long at(long millis) {
        return origin + millis * MILLI;
    }

    void planned(String... lines) {
        assertThat(trace.lines).containsExactly(lines);
    }
}
