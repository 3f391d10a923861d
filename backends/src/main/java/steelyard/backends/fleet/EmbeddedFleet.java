package steelyard.backends.fleet;

import io.netty.channel.EventLoopGroup;
import java.net.InetSocketAddress;
import java.nio.file.Path;
import java.security.cert.X509Certificate;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.CompletionException;
import java.util.concurrent.ExecutionException;
import java.util.concurrent.TimeUnit;
import java.util.concurrent.TimeoutException;
import java.util.function.LongSupplier;
import org.jspecify.annotations.Nullable;
import steelyard.backends.behave.Change;
import steelyard.backends.behave.Figures;
import steelyard.backends.stub.Answers;
import steelyard.backends.stub.BackendListener;
import steelyard.backends.stub.BadAnswers;
import steelyard.backends.stub.Stub;
import steelyard.backends.stub.StubSettings;
import steelyard.backends.stub.ThrowAwayCertificate;
import steelyard.backends.stub.Transport;

/** All backends in this process, each on a loopback port of its own, sharing a few event loops. */
public final class EmbeddedFleet implements Fleet {

    private static final long LONGEST_STEP_SECONDS = 10;

    private final Transport transport = Transport.best();
    private final int loops;
    private final List<Stub> stubs = new ArrayList<>();
    private final List<InetSocketAddress> addresses = new ArrayList<>();
    private @Nullable EventLoopGroup group;
    private @Nullable ThrowAwayCertificate tls;
    private boolean started;

    /** One event loop for all. */
    public EmbeddedFleet() {
        this(1);
    }

    /** @param loops event loops to spread the backends over, 1 or above */
    public EmbeddedFleet(int loops) {
        if (loops < 1) {
            throw new IllegalArgumentException("a fleet needs 1 event loop or more, but got " + loops);
        }
        this.loops = loops;
    }

    @Override
    public void start(List<BackendSpec> backends, long seed, LongSupplier clock, BackendListener listener)
            throws CannotStart {
        if (started) {
            throw new IllegalStateException("a fleet is started once");
        }
        started = true;
        List<@Nullable Answers> folders = readFolders(backends);
        tls = backends.stream().anyMatch(BackendSpec::tls) ? ThrowAwayCertificate.make() : null;
        group = transport.loops(loops, "backends");
        try {
            for (int backend = 0; backend < backends.size(); backend++) {
                startOne(backend, backends.get(backend), folders.get(backend), seed, clock, listener, group);
            }
        } catch (CannotStart | RuntimeException failure) {
            closeAfter(failure);
            throw failure;
        }
    }

    @Override
    public InetSocketAddress address(int backend) {
        return addresses.get(backend);
    }

    @Override
    public @Nullable X509Certificate certificate() {
        return tls == null ? null : tls.certificate();
    }

    @Override
    public CompletableFuture<Long> apply(int backend, Change change) {
        return stubs.get(backend).apply(change);
    }

    @Override
    public CompletableFuture<Figures> figures(int backend) {
        return stubs.get(backend).figures();
    }

    @Override
    public void close() {
        EventLoopGroup running = group;
        if (running == null) {
            return;
        }
        group = null;
        List<Throwable> failures = new ArrayList<>();
        List<CompletableFuture<Void>> closing = stubs.stream().map(Stub::close).toList();
        closing.forEach(one -> await(one, failures));
        CompletableFuture<Void> stopped = new CompletableFuture<>();
        running.shutdownGracefully(0, LONGEST_STEP_SECONDS, TimeUnit.SECONDS)
                .addListener(done -> stopped.complete(null));
        await(stopped, failures);
        if (!failures.isEmpty()) {
            IllegalStateException all =
                    new IllegalStateException(failures.size() + " steps of closing the backends failed");
            failures.forEach(all::addSuppressed);
            throw all;
        }
    }

    /** Before anything is opened, so that a bad file stops the play early; each backend keeps states of its own. */
    private static List<@Nullable Answers> readFolders(List<BackendSpec> backends) throws CannotStart {
        List<@Nullable Answers> folders = new ArrayList<>();
        for (BackendSpec spec : backends) {
            folders.add(spec.answers() == null ? null : read(spec.answers()));
        }
        return folders;
    }

    private static Answers read(Path folder) throws CannotStart {
        try {
            return Answers.read(folder);
        } catch (BadAnswers failure) {
            throw new CannotStart(String.valueOf(failure.getMessage()), failure);
        }
    }

    private void startOne(
            int backend,
            BackendSpec spec,
            @Nullable Answers answers,
            long seed,
            LongSupplier clock,
            BackendListener listener,
            EventLoopGroup on)
            throws CannotStart {
        InetSocketAddress address =
                new InetSocketAddress("127.0.0.1", Ports.ofThisProcess().next());
        StubSettings settings = new StubSettings(
                backend,
                address,
                spec.behaviour(),
                seed,
                spec.probePath(),
                spec.loadPath(),
                answers,
                spec.tls() ? tls : null);
        List<Throwable> failures = new ArrayList<>();
        Stub stub = await(Stub.start(settings, transport, on.next(), clock, listener), failures);
        if (stub == null) {
            Throwable cause = failures.get(0);
            throw new CannotStart(
                    "backend " + spec.name() + " cannot listen on 127.0.0.1:" + address.getPort() + ": "
                            + cause.getMessage() + "; end what took the port, or play again to get another",
                    cause);
        }
        stubs.add(stub);
        addresses.add(address);
    }

    private void closeAfter(Exception failure) {
        try {
            close();
        } catch (IllegalStateException closing) {
            failure.addSuppressed(closing);
        }
    }

    private static <T> @Nullable T await(CompletableFuture<T> step, List<Throwable> failures) {
        try {
            return step.get(LONGEST_STEP_SECONDS, TimeUnit.SECONDS);
        } catch (ExecutionException failure) {
            Throwable cause = failure.getCause();
            failures.add(cause instanceof CompletionException && cause.getCause() != null ? cause.getCause() : cause);
        } catch (TimeoutException late) {
            failures.add(late);
        } catch (InterruptedException stop) {
            Thread.currentThread().interrupt();
            failures.add(stop);
        }
        return null;
    }
}
