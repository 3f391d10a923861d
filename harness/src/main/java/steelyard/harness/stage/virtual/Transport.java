package steelyard.harness.stage.virtual;

/**
 * What the wire costs on the virtual stage, every way the same.
 *
 * @param hopNanos from one process to the next, one way, at least 0
 */
public record Transport(long hopNanos) {
    /** A loopback hop, handling included: a round figure for forecasts that were not measured on a machine. */
    public static final Transport USUAL = new Transport(50_000);

    public Transport {
        if (hopNanos < 0) {
            throw new IllegalArgumentException("a hop cannot take " + hopNanos + " ns");
        }
    }
}
