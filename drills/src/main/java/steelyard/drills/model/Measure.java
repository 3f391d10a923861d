package steelyard.drills.model;

/** The defined figures of a run. */
public enum Measure implements Worded {
    FAILED("failed", Unit.SHARE),
    LONGEST_OUTAGE("longest-outage", Unit.DURATION),
    LATENCY("latency", Unit.DURATION),
    SHARE("share", Unit.SHARE),
    DETECTED_IN("detected-in", Unit.DURATION),
    SHIFTED_IN("shifted-in", Unit.DURATION),
    SETTLED_IN("settled-in", Unit.DURATION),
    DRAINED_IN("drained-in", Unit.DURATION),
    CUT("cut", Unit.COUNT),
    STANDING_CHANGES("standing-changes", Unit.COUNT),
    RETRY_LOAD("retry-load", Unit.NUMBER),
    PEAK_IN_FLIGHT("peak-in-flight", Unit.COUNT),
    PEAK_UTILISATION("peak-utilisation", Unit.SHARE),
    FAIRNESS("fairness", Unit.NUMBER),
    WEIGHT_LAG("weight-lag", Unit.DURATION),
    SWING("swing", Unit.SHARE);

    private final String word;
    private final Unit unit;

    Measure(String word, Unit unit) {
        this.word = word;
        this.unit = unit;
    }

    @Override
    public String word() {
        return word;
    }

    public Unit unit() {
        return unit;
    }

    /** Whether it counts from a cue ({@code after:}) instead of over a window. */
    public boolean countsFromCue() {
        return switch (this) {
            case DETECTED_IN, SHIFTED_IN, SETTLED_IN, DRAINED_IN -> true;
            case FAILED,
                    LONGEST_OUTAGE,
                    LATENCY,
                    SHARE,
                    CUT,
                    STANDING_CHANGES,
                    RETRY_LOAD,
                    PEAK_IN_FLIGHT,
                    PEAK_UTILISATION,
                    FAIRNESS,
                    WEIGHT_LAG,
                    SWING -> false;
        };
    }

    /** What a measure is counted in. */
    public enum Unit {
        /** Fraction from 0 to 1, written as a percentage. */
        SHARE,
        /** Nanoseconds, written with a unit. */
        DURATION,
        COUNT,
        NUMBER
    }
}
