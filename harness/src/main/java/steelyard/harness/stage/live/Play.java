package steelyard.harness.stage.live;

import io.netty.channel.EventLoop;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.TimeUnit;
import steelyard.backends.behave.Change;
import steelyard.backends.fleet.Fleet;
import steelyard.balancer.live.Balancer;
import steelyard.balancer.settings.DrainSettings;
import steelyard.balancer.settings.PoolSettings;
import steelyard.balancer.settings.ProbeSettings;
import steelyard.drills.model.Cue;
import steelyard.harness.record.PlayListener;
import steelyard.harness.stage.Agenda;
import steelyard.harness.stage.CannotPlay;
import steelyard.harness.stage.Hands;

/**
 * Plays an agenda on the generator's loop, from play time 0 to the end of the last request.
 *
 * <p>One timer drives it: each turn lets clients give up, hands out what is due, and sets the timer for whatever comes
 * next. A turn comes at least every 10 ms, so that a cue by hand and an interruption are seen soon.
 */
final class Play implements Hands {
    private static final long LONGEST_REST_NANOS = TimeUnit.MILLISECONDS.toNanos(10);
    /** After an interruption, open requests get that long to be answered. */
    private static final long GRACE_NANOS = TimeUnit.MILLISECONDS.toNanos(300);
    /** Things done in one turn; in between, the loop reads and writes. */
    private static final int MOST_A_TURN = 64;

    private final EventLoop loop;
    private final PlayClock clock;
    private final Account account;
    private final Generator generator;
    private final Balancer balancer;
    private final Fleet fleet;
    private final Agenda agenda;
    private final CompletableFuture<Boolean> over = new CompletableFuture<>();
    private final List<CompletableFuture<Long>> changing = new ArrayList<>();
    private volatile boolean interrupted;
    private long abandonNanos = Long.MAX_VALUE;
    private long cueNanos = Long.MAX_VALUE;

    Play(
            EventLoop loop,
            PlayClock clock,
            Account account,
            Generator generator,
            Balancer balancer,
            Fleet fleet,
            Agenda agenda) {
        this.loop = loop;
        this.clock = clock;
        this.account = account;
        this.generator = generator;
        this.balancer = balancer;
        this.fleet = fleet;
        this.agenda = agenda;
    }

    /** Starts the turns. The result says whether the play was complete; it fails when the play cannot go on. Any thread. */
    CompletableFuture<Boolean> start() {
        account.holdAfter(-1);
        loop.execute(this::turn);
        return over;
    }

    /** Ends the play soon. Any thread. */
    void interrupt() {
        interrupted = true;
    }

    /** The play cannot go on. Any thread. */
    void fail(Throwable cause) {
        over.completeExceptionally(cause);
    }

    private void turn() {
        if (over.isDone()) {
            return;
        }
        try {
            long now = clock.playNow();
            generator.giveUp(now);
            if (!ending(now) && agenda.hasNext() && agenda.nextNanos() <= now) {
                agenda.poll(now, this, MOST_A_TURN);
            }
            account.holdAfter(toldUpTo(now));
            if (generator.open() == 0 && (interrupted || !agenda.hasNext())) {
                over.complete(!interrupted);
            } else {
                rest(clock.playNow());
            }
        } catch (RuntimeException failure) {
            fail(failure);
        }
    }

    private long toldUpTo(long now) {
        if (interrupted || !agenda.hasNext()) {
            return Long.MAX_VALUE;
        }
        return Math.min(now, agenda.nextNanos() - 1);
    }

    private boolean ending(long now) {
        if (!interrupted) {
            return false;
        }
        if (abandonNanos == Long.MAX_VALUE) {
            abandonNanos = now + GRACE_NANOS;
            account.tell(Account.Source.CUES, now, PlayListener::interrupted);
        }
        if (now >= abandonNanos) {
            generator.drop();
        }
        return true;
    }

    private void rest(long now) {
        long next = Math.min(generator.nextGiveUpNanos(), now + LONGEST_REST_NANOS);
        if (!interrupted && agenda.hasNext()) {
            next = Math.min(next, agenda.nextNanos());
        }
        if (next <= now) {
            loop.execute(this::turn);
        } else {
            loop.schedule(this::turn, next - now, TimeUnit.NANOSECONDS);
        }
    }

    @Override
    public void send(long request, long dueNanos, int traffic, int kind, int client) {
        generator.send(request, dueNanos, traffic, kind, client);
    }

    @Override
    public void change(int backend, Change change) {
        noteCue();
        changing.add(fleet.apply(backend, change));
    }

    @Override
    public void drain(int backend, long limitNanos) {
        noteCue();
        balancer.drain(backend, limitNanos);
    }

    @Override
    public void admit(int backend) {
        noteCue();
        balancer.admit(backend);
    }

    @Override
    public void withdraw(int backend) {
        noteCue();
        balancer.withdraw(backend);
    }

    @Override
    public void reweigh(int backend, int weight) {
        noteCue();
        balancer.reweigh(backend, weight);
    }

    @Override
    public void reweighHost(int host, int weight) {
        noteCue();
        balancer.reweighHost(host, weight);
    }

    @Override
    public void retune(int pool, ProbeSettings probe) {
        noteCue();
        balancer.retune(pool, probe);
    }

    @Override
    public void retune(int pool, DrainSettings drain) {
        noteCue();
        balancer.retune(pool, drain);
    }

    @Override
    public void retune(int pool, PoolSettings.Method method) {
        noteCue();
        balancer.retune(pool, method);
    }

    /**
     * A cue counts from the first instant at which any of it was in force, so that nothing that it brings about comes
     * before it in the account. Backends say when that was, a moment later.
     */
    @Override
    public void apply(long dueNanos, Cue cue, PlayListener.By by, Runnable carryOut) {
        carryOut.run();
        noteCue();
        long begun = cueNanos;
        cueNanos = Long.MAX_VALUE;
        if (changing.isEmpty()) {
            tellApplied(begun, dueNanos, cue, by);
            return;
        }
        List<CompletableFuture<Long>> parts = List.copyOf(changing);
        changing.clear();
        CompletableFuture.allOf(parts.toArray(CompletableFuture<?>[]::new)).whenComplete((done, failure) -> {
            if (failure == null) {
                tellApplied(firstInForce(parts), dueNanos, cue, by);
            } else {
                Throwable cause = failure.getCause() == null ? failure : failure.getCause();
                fail(new CannotPlay(
                        "the cue \"" + cue.name() + "\" could not be carried out: " + cause.getMessage(), cause));
            }
        });
    }

    private long firstInForce(List<CompletableFuture<Long>> parts) {
        return parts.stream()
                .mapToLong(each -> clock.playNanos(each.join()))
                .min()
                .orElseThrow();
    }

    private void tellApplied(long atNanos, long dueNanos, Cue cue, PlayListener.By by) {
        account.tell(Account.Source.CUES, atNanos, (to, at) -> to.cueApplied(at, dueNanos, cue, by));
    }

    private void noteCue() {
        cueNanos = Math.min(cueNanos, clock.playNow());
    }
}
