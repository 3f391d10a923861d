package steelyard.backends.fleet;

import java.net.InetSocketAddress;
import java.security.cert.X509Certificate;
import java.util.List;
import java.util.concurrent.CompletableFuture;
import java.util.function.LongSupplier;
import org.jspecify.annotations.Nullable;
import steelyard.backends.behave.Change;
import steelyard.backends.behave.Figures;
import steelyard.backends.stub.BackendListener;

/**
 * All backends of a play. A backend is known by its place in the list handed to {@link #start}, from 0; any other number
 * is an {@link IndexOutOfBoundsException}.
 *
 * <p>Started once and closed once, by one thread; everything else from any thread while it runs.
 */
public interface Fleet extends AutoCloseable {

    /**
     * Starts every backend, or none: what had started is stopped again before this throws. Returns when all accept
     * connections.
     *
     * @param seed of the draws of all backends
     * @param clock nanoseconds, never going back, from any origin; read from many threads
     * @param listener hears of every request
     * @throws CannotStart if no port is free, or an answers folder cannot be used
     */
    void start(List<BackendSpec> backends, long seed, LongSupplier clock, BackendListener listener) throws CannotStart;

    /** Where a backend listens; it keeps this address through kill and revive. */
    InetSocketAddress address(int backend);

    /**
     * What a client of the backends that serve TLS has to trust: one certificate for all of them, made at the start and for
     * their addresses; null if none of them does.
     */
    @Nullable
    X509Certificate certificate();

    /** Applies a change; see {@link steelyard.backends.stub.StubControl#apply}. */
    CompletableFuture<Long> apply(int backend, Change change);

    /** The accounts of a backend as of now. */
    CompletableFuture<Figures> figures(int backend);

    /**
     * Stops everything and leaves no socket. A second call does nothing.
     *
     * @throws IllegalStateException if something could not be closed; all such failures are its suppressed ones
     */
    @Override
    void close();
}
