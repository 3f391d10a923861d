package steelyard.harness.forecast;

import steelyard.drills.model.Drill;
import steelyard.harness.stage.virtual.Transport;

/**
 * Plays of one drill, one seed after the other. Series of the same first seed see the same arrivals and the same service
 * demands play by play, whatever else differs (common random numbers).
 *
 * @param seed of the first play; play number n has {@code seed + n}
 * @param plays how many, at least 1
 * @param transport what the wire costs in all of them
 */
public record Series(Drill drill, long seed, int plays, Transport transport) {
    public Series {
        if (plays < 1) {
            throw new IllegalArgumentException("a series of " + plays + " plays");
        }
    }

    /** A series with the usual transport. */
    public static Series of(Drill drill, long seed, int plays) {
        return new Series(drill, seed, plays, Transport.USUAL);
    }

    /** The seed of a play. */
    long seedOf(int play) {
        return seed + play;
    }
}
