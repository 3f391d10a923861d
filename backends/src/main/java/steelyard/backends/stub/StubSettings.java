package steelyard.backends.stub;

import java.net.InetSocketAddress;
import java.util.Objects;
import org.jspecify.annotations.Nullable;
import steelyard.backends.behave.BehaviourSettings;

/**
 * What one stub is made of.
 *
 * @param backend its number in the play, 0 or above: handed to the listener, and the key of its probes' draws
 * @param address where it listens, with a port of its own
 * @param behaviour how it serves
 * @param seed of its draws
 * @param probePath path, perhaps with a query, that is a probe and not traffic, or null for none
 * @param loadPath path that is a reading of the load page and not traffic, or null for none; only with a behaviour that has
 *     a load page
 * @param answers where its answers come from, or null for the plain answer of the behaviour
 * @param tls what it serves TLS with, or null for none
 */
public record StubSettings(
        int backend,
        InetSocketAddress address,
        BehaviourSettings behaviour,
        long seed,
        @Nullable String probePath,
        @Nullable String loadPath,
        @Nullable Answers answers,
        @Nullable ThrowAwayCertificate tls) {
    public StubSettings {
        Objects.requireNonNull(address);
        Objects.requireNonNull(behaviour);
        if (backend < 0) {
            throw new IllegalArgumentException("backend number must be 0 or more, but is " + backend);
        }
        if (address.isUnresolved() || address.getPort() == 0) {
            throw new IllegalArgumentException("a stub needs an address with a port, but got " + address);
        }
        if (loadPath != null && behaviour.load() == null) {
            throw new IllegalArgumentException("a load path needs a behaviour with a load page, but got " + loadPath);
        }
    }

    /** Without a load page and TLS. */
    public StubSettings(
            int backend,
            InetSocketAddress address,
            BehaviourSettings behaviour,
            long seed,
            @Nullable String probePath,
            @Nullable Answers answers) {
        this(backend, address, behaviour, seed, probePath, null, answers, null);
    }
}
