package steelyard.drills.model;

/**
 * How the method that picks the shortest expected delay expects it.
 *
 * @param candidates which backends are compared
 * @param memoryNanos how fast a service time seen is forgotten: after that long it counts 1/e; above zero
 */
public record Delay(Candidates candidates, long memoryNanos) {
    /** What holds where a drill says nothing. */
    public static final Delay USUAL = new Delay(Candidates.TWO, 10_000_000_000L);

    public Delay {
        Check.positive(memoryNanos, "memory");
    }

    /** Which backends are compared for a pick. */
    public enum Candidates implements Worded {
        /** Two, drawn by weight. */
        TWO("two"),
        ALL("all");

        private final String word;

        Candidates(String word) {
            this.word = word;
        }

        @Override
        public String word() {
            return word;
        }
    }
}
