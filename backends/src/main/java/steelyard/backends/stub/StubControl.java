package steelyard.backends.stub;

import java.util.concurrent.CompletableFuture;
import steelyard.backends.behave.Change;
import steelyard.backends.behave.Figures;

/**
 * What a running stub takes from outside: changes, and questions about its accounts. The same in this process and over
 * its control port. Any thread; calls return at once.
 */
public interface StubControl {

    /**
     * Applies one change.
     *
     * @return completed with the instant, by the stub's clock, at which the change was in force; for a change that opens
     *     the port, after it is open. Fails with {@link java.io.IOException} if the port could not be opened again.
     */
    CompletableFuture<Long> apply(Change change);

    /** The accounts as of now. */
    CompletableFuture<Figures> figures();
}
