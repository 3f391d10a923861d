package steelyard.backends.stub;

import io.netty.bootstrap.ServerBootstrap;
import io.netty.channel.ChannelInitializer;
import io.netty.channel.ChannelOption;
import io.netty.channel.EventLoop;
import io.netty.channel.socket.SocketChannel;
import io.netty.handler.codec.http.HttpResponseEncoder;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.RejectedExecutionException;
import java.util.function.LongSupplier;
import java.util.function.Supplier;
import steelyard.backends.behave.Change;
import steelyard.backends.behave.Figures;

/**
 * A backend on a port of its own. Everything happens on the event loop handed in; the methods may be called from any
 * thread and return at once. Once closed, every call fails with {@link IllegalStateException}.
 */
public final class Stub implements StubControl {

    private static final int BACKLOG = 4096;

    private final EventLoop loop;
    private final PlanRunner runner;
    private boolean closed;

    private Stub(EventLoop loop, PlanRunner runner) {
        this.loop = loop;
        this.runner = runner;
    }

    /**
     * Starts a stub.
     *
     * @param loop of a group made by {@code transport}
     * @param clock nanoseconds from any origin, never going back
     * @return completed when it accepts connections, failed with the {@link java.io.IOException} if the port cannot be
     *     opened
     */
    public static CompletableFuture<Stub> start(
            StubSettings settings, Transport transport, EventLoop loop, LongSupplier clock, BackendListener listener) {
        PlanRunner runner = new PlanRunner(settings, loop, clock, listener, of -> door(settings, transport, loop, of));
        Stub stub = new Stub(loop, runner);
        return stub.onLoop(() -> runner.door().open()).thenApply(opened -> stub);
    }

    @Override
    public CompletableFuture<Long> apply(Change change) {
        return onLoop(() -> {
            boolean wasListening = runner.listening();
            long atNanos = runner.apply(change);
            boolean opens = runner.listening() && !wasListening;
            return opens
                    ? runner.door().opening().thenApply(open -> runner.now())
                    : CompletableFuture.completedFuture(atNanos);
        });
    }

    @Override
    public CompletableFuture<Figures> figures() {
        return onLoop(() -> CompletableFuture.completedFuture(runner.figures()));
    }

    /** Bytes of request bodies read so far. */
    public CompletableFuture<Long> bodyBytes() {
        return onLoop(() -> CompletableFuture.completedFuture(runner.bodyBytes()));
    }

    /** Closes the port and every connection; completes when all are closed. */
    public CompletableFuture<Void> close() {
        return onLoop(() -> {
            closed = true;
            CompletableFuture<?>[] closing =
                    runner.stop().stream().map(Stub::closing).toArray(CompletableFuture<?>[]::new);
            return CompletableFuture.allOf(closing);
        });
    }

    private static CompletableFuture<Void> closing(Connection connection) {
        CompletableFuture<Void> done = new CompletableFuture<>();
        connection.close().addListener(closed -> done.complete(null));
        return done;
    }

    private <T> CompletableFuture<T> onLoop(Supplier<CompletableFuture<T>> step) {
        CompletableFuture<T> done = new CompletableFuture<>();
        try {
            loop.execute(() -> run(step, done));
        } catch (RejectedExecutionException stopped) {
            done.completeExceptionally(new IllegalStateException("the stub is closed", stopped));
        }
        return done;
    }

    private <T> void run(Supplier<CompletableFuture<T>> step, CompletableFuture<T> done) {
        if (closed) {
            done.completeExceptionally(new IllegalStateException("the stub is closed"));
            return;
        }
        try {
            step.get().whenComplete((value, failure) -> {
                if (failure == null) {
                    done.complete(value);
                } else {
                    done.completeExceptionally(failure);
                }
            });
        } catch (RuntimeException failure) {
            done.completeExceptionally(failure);
        }
    }

    private static Door door(StubSettings settings, Transport transport, EventLoop loop, PlanRunner runner) {
        ThrowAwayCertificate tls = settings.tls();
        ServerBootstrap bootstrap = new ServerBootstrap()
                .group(loop)
                .channel(transport.serverChannel())
                .option(ChannelOption.SO_REUSEADDR, true)
                .option(ChannelOption.SO_BACKLOG, BACKLOG)
                .childOption(ChannelOption.TCP_NODELAY, true)
                .childHandler(new ChannelInitializer<SocketChannel>() {
                    @Override
                    protected void initChannel(SocketChannel channel) {
                        if (tls != null) {
                            channel.pipeline().addLast(tls.server().newHandler(channel.alloc()));
                        }
                        channel.pipeline()
                                .addLast(new RequestDecoder(), new HttpResponseEncoder(), new Connection(runner));
                    }
                });
        return new Door(loop, bootstrap, settings.address());
    }
}
