package steelyard.drills.model;

import java.util.Arrays;
import java.util.Objects;
import org.jspecify.annotations.Nullable;

/**
 * Service times that were recorded somewhere. Immutable.
 *
 * @param file the file as the drill names it
 * @param column the column as the drill names it, or null for the first
 * @param order how they are taken
 * @param nanos the times, at least one, each above zero, in the order of the file
 */
public record Trace(String file, @Nullable String column, Order order, Nanos nanos) {
    public Trace {
        Objects.requireNonNull(file);
        Objects.requireNonNull(order);
        Objects.requireNonNull(nanos);
    }

    /** How the times of a trace are taken. */
    public enum Order implements Worded {
        /** Each request draws one, all alike likely. */
        SAMPLED("sampled"),
        /** Request by request in the order of the file, from its start again at its end. */
        REPLAYED("replayed");

        private final String word;

        Order(String word) {
            this.word = word;
        }

        @Override
        public String word() {
            return word;
        }
    }

    /** Durations that nobody changes. */
    public static final class Nanos {
        private final long[] each;

        private Nanos(long[] each) {
            this.each = each;
        }

        /** A copy of those. Throws {@link IllegalArgumentException} when there is none, or one is not above zero. */
        public static Nanos of(long... nanos) {
            Check.that(nanos.length > 0, "a trace holds a time");
            for (long one : nanos) {
                Check.positive(one, "a time of a trace");
            }
            return new Nanos(nanos.clone());
        }

        /** How many there are. */
        public int size() {
            return each.length;
        }

        /** All of them, in an array of the caller's own. */
        public long[] toArray() {
            return each.clone();
        }

        /** Their mean. */
        public double mean() {
            return Arrays.stream(each).average().orElseThrow();
        }

        @Override
        public boolean equals(@Nullable Object other) {
            return other instanceof Nanos nanos && Arrays.equals(each, nanos.each);
        }

        @Override
        public int hashCode() {
            return Arrays.hashCode(each);
        }

        @Override
        public String toString() {
            return each.length + " times";
        }
    }
}
