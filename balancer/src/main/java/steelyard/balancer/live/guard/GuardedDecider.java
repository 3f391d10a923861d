package steelyard.balancer.live.guard;

import io.netty.util.concurrent.EventExecutor;
import java.util.function.LongSupplier;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.decide.Ask;
import steelyard.balancer.core.decide.Chance;
import steelyard.balancer.core.decide.Decider;
import steelyard.balancer.core.decide.DecisionSink;
import steelyard.balancer.core.decide.Orders;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.settings.BalancerSettings;

/**
 * A Decider behind one lock.
 *
 * <p>Time is read inside the lock, so that the Decider never sees it run backwards and the order of decisions is the
 * order of their instants. The sink is called inside the lock. Orders are handed, inside the lock, to one executor,
 * which carries them out in the order in which they were given. A timer on the same executor polls the Decider at its
 * deadlines. Every method may be called from any thread; before {@link #begin} nothing but {@link #hasBegun} and
 * {@link #end} may be called, and after {@link #end} the Decider still answers but orders and timers are dropped.
 */
public final class GuardedDecider {
    private final BalancerSettings settings;
    private final LongSupplier nanoClock;
    private final Chance chance;
    private final DecisionSink sink;
    private final HandedOn orders;
    private final Alarm alarm;

    private final Object lock = new Object();
    private @Nullable Decider decider;
    private boolean ended;

    /**
     * @param nanoClock the only clock that is read, monotonic, in nanoseconds
     * @param home carries out orders and runs the timer
     * @param carriedOut called on {@code home}, outside the lock
     */
    public GuardedDecider(
            BalancerSettings settings,
            LongSupplier nanoClock,
            Chance chance,
            DecisionSink sink,
            EventExecutor home,
            Orders carriedOut) {
        this.settings = settings;
        this.nanoClock = nanoClock;
        this.chance = chance;
        this.sink = sink;
        this.orders = new HandedOn(home, carriedOut);
        this.alarm = new Alarm(home, this::rung);
    }

    /** Creates the Decider; its times are counted from {@code nowNanos}. Once. */
    public void begin(long nowNanos) {
        synchronized (lock) {
            if (decider != null) {
                throw new IllegalStateException("already begun");
            }
            decider = new Decider(settings, chance, sink, orders, nowNanos);
            rearm(decider, nowNanos);
        }
    }

    /** Whether {@link #begin} was called. */
    public boolean hasBegun() {
        synchronized (lock) {
            return decider != null;
        }
    }

    /** Stops the timer and drops orders that still come. */
    public void end() {
        synchronized (lock) {
            ended = true;
            orders.end();
            alarm.stop();
        }
    }

    /**
     * Where the pool has a waiting queue, whoever asks must be ready for {@link Orders#place} by the ask's ticket before it
     * asks: the order may be carried out on another thread before this method has returned.
     *
     * @see Decider#pick
     */
    public int pick(Ask ask) {
        synchronized (lock) {
            Decider begun = begun();
            long now = nanoClock.getAsLong();
            int backend = begun.pick(ask, now);
            rearm(begun, now);
            return backend;
        }
    }

    /** @see Decider#leave */
    public boolean leave(long ticket) {
        synchronized (lock) {
            Decider begun = begun();
            long now = nanoClock.getAsLong();
            boolean waited = begun.leave(ticket, now);
            rearm(begun, now);
            return waited;
        }
    }

    /** @see Decider#ended */
    public void ended(int backend, long request, int attempt, Outcome outcome, int status) {
        synchronized (lock) {
            Decider begun = begun();
            long now = nanoClock.getAsLong();
            begun.ended(backend, request, attempt, outcome, status, now);
            rearm(begun, now);
        }
    }

    /** @see Decider#retry */
    public boolean retry(
            int pool,
            long request,
            int attempt,
            Outcome outcome,
            int status,
            boolean idempotent,
            boolean headSent,
            boolean replayable) {
        synchronized (lock) {
            long now = nanoClock.getAsLong();
            return begun().retry(pool, request, attempt, outcome, status, idempotent, headSent, replayable, now);
        }
    }

    /** @see Decider#saysClose */
    public boolean saysClose(int backend) {
        synchronized (lock) {
            return begun().saysClose(backend);
        }
    }

    /** @see Decider#probeAnswered */
    public void probeAnswered(int backend, long probe, boolean good) {
        change((begun, now) -> begun.probeAnswered(backend, probe, good, now));
    }

    /** @see Decider#read */
    public void read(int backend, long number, double @Nullable [] gauges) {
        change((begun, now) -> begun.read(backend, number, gauges, now));
    }

    /** Applies a change at the present instant: hand commands and probe answers, which are rare. */
    public void change(Change change) {
        synchronized (lock) {
            Decider begun = begun();
            long now = nanoClock.getAsLong();
            change.apply(begun, now);
            rearm(begun, now);
        }
    }

    /** Fills {@code readings} with every backend's figures at one instant. */
    public void read(BackendReadings readings) {
        synchronized (lock) {
            readings.take(begun(), nanoClock.getAsLong());
        }
    }

    /** Something done to the Decider under the lock; must not block. */
    @FunctionalInterface
    public interface Change {
        void apply(Decider decider, long nowNanos);
    }

    private Decider begun() {
        if (decider == null) {
            throw new IllegalStateException("not begun");
        }
        return decider;
    }

    private void rearm(Decider begun, long nowNanos) {
        if (!ended && begun.hasDeadline()) {
            alarm.set(begun.nextDeadlineNanos(), nowNanos);
        }
    }

    private void rung(long set) {
        synchronized (lock) {
            if (alarm.rings(set)) {
                Decider begun = begun();
                long now = nanoClock.getAsLong();
                begun.poll(now);
                rearm(begun, now);
            }
        }
    }
}
