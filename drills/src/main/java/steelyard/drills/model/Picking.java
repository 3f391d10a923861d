package steelyard.drills.model;

import java.util.Objects;
import org.jspecify.annotations.Nullable;

/**
 * How a pool picks a backend for one unit of work.
 *
 * @param hash what is hashed and how; there exactly with {@link Pool.Method#HASH}
 * @param delay how delay is expected; there exactly with {@link Pool.Method#EXPECTED_DELAY}
 * @param affinity how a client is held to the backend that served it, or null for not at all
 */
public record Picking(
        Pool.Method method,
        Pool.Count count,
        Pool.Weights weights,
        @Nullable Hashing hash,
        @Nullable Delay delay,
        @Nullable Affinity affinity) {

    public Picking {
        Objects.requireNonNull(count);
        Objects.requireNonNull(weights);
        Check.that((method == Pool.Method.HASH) == (hash != null), "method %s and hash", method.word());
        Check.that((method == Pool.Method.EXPECTED_DELAY) == (delay != null), "method %s and delay", method.word());
        Check.that(
                weights != Pool.Weights.HOST || method == Pool.Method.WEIGHTED_ROUND_ROBIN,
                "turns of hosts under method %s",
                method.word());
        Check.that(weights != Pool.Weights.LOAD || method.weighs(), "weights by load under method %s", method.word());
    }

    /** Requests spread by a method with the backends' own weights, and whatever the method has to be told as usual. */
    public static Picking by(Pool.Method method) {
        return new Picking(
                method,
                Pool.Count.REQUESTS,
                Pool.Weights.BACKEND,
                method == Pool.Method.HASH ? Hashing.USUAL : null,
                method == Pool.Method.EXPECTED_DELAY ? Delay.USUAL : null,
                null);
    }

    public Picking with(Pool.Count other) {
        return new Picking(method, other, weights, hash, delay, affinity);
    }

    public Picking with(Pool.Weights other) {
        return new Picking(method, count, other, hash, delay, affinity);
    }

    public Picking with(Affinity other) {
        return new Picking(method, count, weights, hash, delay, other);
    }
}
