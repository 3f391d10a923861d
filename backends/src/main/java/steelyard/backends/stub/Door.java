package steelyard.backends.stub;

import io.netty.bootstrap.ServerBootstrap;
import io.netty.channel.Channel;
import io.netty.channel.ChannelFuture;
import io.netty.channel.EventLoop;
import java.io.IOException;
import java.net.InetSocketAddress;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.TimeUnit;
import org.jspecify.annotations.Nullable;

/**
 * The listening socket of a stub. Shut, the kernel refuses connections; open again, it is the same port. On the stub's
 * event loop only.
 */
final class Door {

    /** A port that was just shut can be busy for a moment: 50 tries, 20 ms apart. */
    private static final int MOST_TRIES = 50;

    private static final long BETWEEN_TRIES_MILLIS = 20;

    private final EventLoop loop;
    private final ServerBootstrap bootstrap;
    private final InetSocketAddress address;
    private final KeptPort kept;
    private @Nullable Channel listening;
    private boolean wanted;
    /** The opening under way, or the last one. */
    private CompletableFuture<Void> opening = CompletableFuture.completedFuture(null);

    Door(EventLoop loop, ServerBootstrap bootstrap, InetSocketAddress address) {
        this.loop = loop;
        this.bootstrap = bootstrap;
        this.address = address;
        kept = new KeptPort(address);
    }

    /** Completes when the port is open, fails with the {@link IOException} of the last try. */
    CompletableFuture<Void> open() {
        if (!wanted) {
            wanted = true;
            kept.letGo();
            opening = new CompletableFuture<>();
            tryToOpen(opening, MOST_TRIES);
        }
        return opening;
    }

    /** Shuts it for a while: nobody else gets the port. */
    void shut() {
        close();
        kept.keep();
    }

    /** Shuts it for good. */
    void close() {
        wanted = false;
        kept.letGo();
        Channel open = listening;
        listening = null;
        if (open != null) {
            open.close();
        }
        opening.completeExceptionally(
                new IOException("port " + address.getPort() + " was shut again before it was open"));
    }

    /** The opening under way, or the last one: what {@link #open} returned. */
    CompletableFuture<Void> opening() {
        return opening;
    }

    private void tryToOpen(CompletableFuture<Void> done, int triesLeft) {
        bootstrap.bind(address).addListener((ChannelFuture bound) -> {
            // A later shut, or shut and open, has made this try stale.
            boolean stale = !wanted || done != opening;
            if (bound.isSuccess() && stale) {
                bound.channel().close();
            } else if (bound.isSuccess()) {
                listening = bound.channel();
                done.complete(null);
            } else if (!stale && triesLeft > 1) {
                loop.schedule(() -> tryAgain(done, triesLeft - 1), BETWEEN_TRIES_MILLIS, TimeUnit.MILLISECONDS);
            } else if (!stale) {
                wanted = false;
                done.completeExceptionally(bound.cause());
            }
        });
    }

    private void tryAgain(CompletableFuture<Void> done, int triesLeft) {
        if (wanted && done == opening) {
            tryToOpen(done, triesLeft);
        }
    }
}
