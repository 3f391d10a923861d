package steelyard.drills.model;

import org.jspecify.annotations.Nullable;

/**
 * How a pool's backends are probed.
 *
 * @param path what an HTTP probe asks for; null for a TCP probe
 * @param everyNanos from one start to the next, above zero
 * @param withinNanos an answer that does not come earlier is a miss; above zero
 * @param misses in a row that make a backend down, at least 1
 * @param passes in a row that make it up again, at least 1
 * @param jitter each period is {@code every} times 1 + jitter x (2u - 1), u drawn evenly; at least 0 and below 1
 */
public record Probe(
        Kind kind, @Nullable String path, long everyNanos, long withinNanos, int misses, int passes, double jitter) {
    public Probe {
        Check.that((kind == Kind.HTTP) == (path != null), "an HTTP probe, and no other, has a path");
        Check.positive(everyNanos, "every");
        Check.positive(withinNanos, "within");
        Check.positive(misses, "misses");
        Check.positive(passes, "passes");
        Check.that(jitter >= 0 && jitter < 1, "jitter is at least 0 and below 1, not %s", jitter);
    }

    /** One that comes at even periods. */
    public Probe(Kind kind, @Nullable String path, long everyNanos, long withinNanos, int misses, int passes) {
        this(kind, path, everyNanos, withinNanos, misses, passes, 0);
    }

    /** What a probe does: ask for a page, or only connect. */
    public enum Kind implements Worded {
        HTTP("http"),
        TCP("tcp");

        private final String word;

        Kind(String word) {
            this.word = word;
        }

        @Override
        public String word() {
            return word;
        }
    }
}
