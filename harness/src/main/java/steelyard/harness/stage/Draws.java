package steelyard.harness.stage;

import steelyard.backends.behave.Chance;
import steelyard.backends.behave.Stream;

/** The draws of a balancer's decisions, made from the seed of the play; the same on both stages. */
public final class Draws {
    private Draws() {}

    public static steelyard.balancer.core.decide.Chance of(Chance chance) {
        return (draw, a, b) -> chance.bits(
                switch (draw) {
                    case PROBE_PHASE -> Stream.PROBE_PHASE;
                    case PROBE_JITTER -> Stream.PROBE_JITTER;
                    case READING_PHASE -> Stream.READING_PHASE;
                    case PICK -> Stream.PICK;
                },
                a,
                b);
    }
}
