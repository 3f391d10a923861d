package steelyard.harness.stage.live;

import io.netty.channel.EventLoop;
import io.netty.channel.EventLoopGroup;
import java.net.InetSocketAddress;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.ExecutionException;
import java.util.concurrent.TimeUnit;
import org.jspecify.annotations.Nullable;
import steelyard.backends.behave.Chance;
import steelyard.backends.fleet.CannotStart;
import steelyard.backends.fleet.EmbeddedFleet;
import steelyard.backends.fleet.Fleet;
import steelyard.backends.fleet.Ports;
import steelyard.backends.stub.Transport;
import steelyard.balancer.live.Balancer;
import steelyard.balancer.live.ControlAddress;
import steelyard.balancer.live.control.CueTaker;
import steelyard.balancer.settings.BalancerSettings;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Traffic;
import steelyard.harness.record.Cast;
import steelyard.harness.record.PlayListener;
import steelyard.harness.stage.Agenda;
import steelyard.harness.stage.CannotPlay;
import steelyard.harness.stage.Draws;
import steelyard.harness.stage.Stage;
import steelyard.harness.stage.StageSettings;
import steelyard.harness.traffic.OfferedRate;

/**
 * A drill's stage on real sockets of the loopback interface: an open-loop generator, the balancer and embedded backends.
 *
 * <p>{@link #open}, {@link #play} and {@link #close} are for one thread; {@link #interrupt} for any.
 */
public final class LiveStage implements Stage {
    /** What the generator is asked to send at most; it has to stay punctual. */
    public static final int MOST_REQUESTS_A_SECOND = 20_000;

    private static final long LEAD_NANOS = TimeUnit.MILLISECONDS.toNanos(20);
    private static final long LONGEST_CLOSE_SECONDS = 5;

    private final Drill drill;
    private final Cast cast;
    private final long seed;
    private final PlayClock clock = new PlayClock();
    private final Transport transport = Transport.best();
    private final Fleet fleet = new EmbeddedFleet();
    private volatile boolean interrupted;
    private volatile @Nullable Play play;
    private @Nullable Account account;
    private @Nullable BalancerAccount decisions;
    private @Nullable Balancer balancer;
    private @Nullable EventLoopGroup loops;
    private @Nullable Generator generator;
    private @Nullable ClientAddresses addresses;

    /** @param seed of every draw of balancer and backends; the agenda should be of the same */
    public LiveStage(Drill drill, long seed) {
        this.drill = drill;
        this.cast = new Cast(drill);
        this.seed = seed;
    }

    @Override
    public void open(PlayListener listener) throws CannotPlay {
        if (account != null) {
            throw new IllegalStateException("a stage is opened once");
        }
        refuseTooMuch();
        addresses = ClientAddresses.of(drill);
        Account told = new Account(listener, clock::playNow, this::failed);
        account = told;
        decisions = new BalancerAccount(told, clock);
        try {
            fleet.start(StageSettings.backends(drill), seed, clock::nanos, new BackendAccount(told, clock));
            balancer = startBalancer(decisions);
        } catch (CannotStart | steelyard.balancer.live.CannotStart failure) {
            throw new CannotPlay(String.valueOf(failure.getMessage()), failure);
        }
        loops = transport.loops(1, "generator");
    }

    /** Whether a drill offers more than the generator could send, so that {@link #open} refuses it. */
    public static boolean tooMuch(Drill drill) {
        return OfferedRate.peakPerSecond(drill) > MOST_REQUESTS_A_SECOND;
    }

    private void refuseTooMuch() throws CannotPlay {
        double peak = OfferedRate.peakPerSecond(drill);
        if (tooMuch(drill)) {
            throw new CannotPlay("the drill offers " + Math.round(peak)
                    + " requests a second at its peak, more than the " + MOST_REQUESTS_A_SECOND
                    + " that the generator sends: forecast it, or lower its rates or its surge");
        }
    }

    private Balancer startBalancer(BalancerAccount sink) throws CannotStart, steelyard.balancer.live.CannotStart {
        BalancerSettings settings = StageSettings.balancer(drill);
        int[] ports = new int[settings.pools().size()];
        for (int pool = 0; pool < ports.length; pool++) {
            int asked = settings.pools().get(pool).front().port();
            ports[pool] = asked == 0 ? Ports.ofThisProcess().next() : asked;
        }
        Chance chance = new Chance(seed);
        return Balancer.start(
                settings, new FleetAddresses(fleet), pool -> ports[pool], clock::nanos, Draws.of(chance), sink);
    }

    /**
     * Whether each client connects from an address of its own, as the drill's clients do; where the system has but one
     * they all come from 127.0.0.1. Only while the stage is open.
     */
    public boolean clientsHaveAddresses() {
        return opened(addresses).own();
    }

    /** Where the front of a pool listens, by the pool's number. Only while the stage is open. */
    public InetSocketAddress frontAddress(int pool) {
        return opened(balancer).frontAddress(pool);
    }

    /**
     * Opens the balancer's control page on a loopback port; the address holds the token made for it. At most once, while
     * the stage is open.
     *
     * @param cues takes the cues that are sent there
     * @throws CannotPlay when no port can be had
     */
    public ControlAddress openControl(CueTaker cues) throws CannotPlay {
        try {
            return opened(balancer).openControl(Ports.ofThisProcess().next(), cues);
        } catch (CannotStart | steelyard.balancer.live.CannotStart failure) {
            throw new CannotPlay(String.valueOf(failure.getMessage()), failure);
        }
    }

    @Override
    public void play(Agenda agenda) throws CannotPlay {
        Account told = opened(account);
        Balancer balancing = opened(balancer);
        EventLoop loop = opened(loops).next();
        Generator sending = generator(loop);
        Play playing = new Play(loop, clock, told, sending, balancing, fleet, agenda);
        Sampler sampler = new Sampler(
                loop,
                clock,
                told,
                balancing,
                fleet,
                cast.backends().size(),
                cast.pools().size(),
                drill.lastsNanos());
        generator = sending;
        play = playing;
        if (interrupted) {
            playing.interrupt();
        }
        told.start();
        boolean complete = false;
        try {
            balancing.begin(clock.begin(LEAD_NANOS));
            sampler.start();
            complete = await(playing.start());
            loop.submit(sending::closeIdle).awaitUninterruptibly();
            new Settling(balancing, fleet, cast.backends().size()).await();
            if (complete) {
                sampler.awaitLast();
            }
        } finally {
            sampler.stop();
            told.finish(complete);
        }
    }

    private Generator generator(EventLoop loop) {
        Balancer balancing = opened(balancer);
        List<Way> ways = new ArrayList<>();
        for (Traffic each : drill.traffic()) {
            int pool = cast.poolNumber(each.pool());
            ways.add(Way.to(
                    balancing.frontAddress(pool),
                    drill.stage().pool(each.pool()).timeouts().idleNanos(),
                    balancing.frontCertificate(pool)));
        }
        return new Generator(
                loop,
                transport,
                clock,
                opened(account),
                drill.traffic(),
                ways,
                opened(addresses),
                drill.stage().connections(),
                opened(decisions)::takeBrokenOff);
    }

    private static boolean await(CompletableFuture<Boolean> over) throws CannotPlay {
        try {
            return over.get();
        } catch (ExecutionException failure) {
            if (failure.getCause() instanceof CannotPlay cannot) {
                throw cannot;
            }
            throw new IllegalStateException("the play broke off", failure.getCause());
        } catch (InterruptedException stop) {
            Thread.currentThread().interrupt();
            throw new CannotPlay("the play was stopped from outside: start it again", stop);
        }
    }

    /**
     * How many entries of the account came too late for their place and were told with the time of their predecessor;
     * none, unless a thread was held up for a quarter of a second all by itself. After {@link #play}.
     */
    public long toldLate() {
        return opened(account).late();
    }

    /** The listener failed: there is no use in going on. */
    private void failed(RuntimeException failure) {
        Play playing = play;
        if (playing != null) {
            playing.fail(failure);
        }
    }

    @Override
    public void interrupt() {
        interrupted = true;
        Play playing = play;
        if (playing != null) {
            playing.interrupt();
        }
    }

    @Override
    public void close() {
        List<Throwable> failures = new ArrayList<>();
        step(failures, this::closeTraffic);
        Balancer balancing = balancer;
        if (balancing != null) {
            step(failures, balancing::close);
        }
        step(failures, fleet::close);
        if (!failures.isEmpty()) {
            IllegalStateException all =
                    new IllegalStateException(failures.size() + " parts of the stage did not close cleanly");
            failures.forEach(all::addSuppressed);
            throw all;
        }
    }

    private void closeTraffic() {
        EventLoopGroup running = loops;
        if (running == null) {
            return;
        }
        Generator sending = generator;
        if (sending != null) {
            running.submit(sending::close).awaitUninterruptibly();
        }
        running.shutdownGracefully(0, LONGEST_CLOSE_SECONDS, TimeUnit.SECONDS);
        if (!running.terminationFuture().awaitUninterruptibly(2 * LONGEST_CLOSE_SECONDS, TimeUnit.SECONDS)) {
            throw new IllegalStateException("the generator's loop did not end");
        }
    }

    private static void step(List<Throwable> failures, Runnable step) {
        try {
            step.run();
        } catch (RuntimeException failure) {
            failures.add(failure);
        }
    }

    private static <T> T opened(@Nullable T part) {
        if (part == null) {
            throw new IllegalStateException("the stage is not open");
        }
        return part;
    }
}
