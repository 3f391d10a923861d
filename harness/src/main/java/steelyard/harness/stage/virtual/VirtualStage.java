package steelyard.harness.stage.virtual;

import org.jspecify.annotations.Nullable;
import steelyard.backends.behave.Chance;
import steelyard.backends.behave.Figures;
import steelyard.backends.fleet.BackendSpec;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Pool;
import steelyard.harness.record.PlayListener;
import steelyard.harness.record.Sample;
import steelyard.harness.stage.Agenda;
import steelyard.harness.stage.CannotPlay;
import steelyard.harness.stage.Stage;
import steelyard.harness.stage.StageSettings;

/**
 * A drill's stage in virtual time: {@link #play} jumps from event to event and returns when nothing is left to happen.
 *
 * <p>The same drill, seed and transport give the same account, to the last number, on any machine. One thread; {@link
 * #interrupt} from any.
 */
public final class VirtualStage implements Stage {
    private static final long SLICE_NANOS = 100_000_000;
    private static final int MOST_AT_ONCE = 1_000;

    private final Drill drill;
    private final long seed;
    private final Transport transport;
    private final Sample sample;
    private volatile boolean interrupted;
    private @Nullable Listening opened;
    private long nowNanos;
    private long nextSliceNanos;

    /** What there is once a listener is known. */
    private record Listening(
            PlayListener listener, Post post, VirtualBackends backends, VirtualBalancer balancer, VirtualHands hands) {}

    /** @param seed of every draw of balancer and backends; the agenda should be of the same */
    public VirtualStage(Drill drill, long seed, Transport transport) {
        this.drill = drill;
        this.seed = seed;
        this.transport = transport;
        this.sample = new Sample(
                drill.stage().backends().size(), drill.stage().pools().size());
        this.nextSliceNanos = sliceAt(SLICE_NANOS);
    }

    @Override
    public void open(PlayListener listener) throws CannotPlay {
        for (BackendSpec spec : StageSettings.backends(drill)) {
            if (spec.answers() != null) {
                throw new CannotPlay("backend " + spec.name() + " answers from mapping files, which cannot be foreseen:"
                        + " rehearse the drill, or give it a service time instead of answers");
            }
        }
        Chance chance = new Chance(seed);
        Post post = new Post(transport, speaksTls());
        VirtualBalancer balancer = new VirtualBalancer(drill, chance, listener, post);
        VirtualBackends backends = new VirtualBackends(
                StageSettings.backends(drill).stream()
                        .map(BackendSpec::behaviour)
                        .toList(),
                chance,
                balancer);
        opened = new Listening(listener, post, backends, balancer, new VirtualHands(listener, backends, balancer));
    }

    private boolean speaksTls() {
        return drill.stage().pools().stream()
                .map(Pool::wire)
                .anyMatch(wire -> wire.backendTls() || wire.front().tls() != null);
    }

    @Override
    public void play(Agenda agenda) {
        Listening stage = opened();
        boolean more = agenda.hasNext();
        while (!interrupted && (more || stage.balancer.busy() || nextSliceNanos != Lane.NEVER)) {
            step(agenda, more, stage);
            more = agenda.hasNext();
            if (!more) {
                stage.balancer.finish(nowNanos);
            }
        }
        boolean complete = !interrupted;
        if (!complete) {
            stage.listener.interrupted(nowNanos);
            stage.balancer.abandonAll(nowNanos);
        }
        stage.listener.ended(nowNanos, complete);
    }

    /** Does the one thing that comes next; at one instant the agenda first, then messages, backends, balancer, samples. */
    private void step(Agenda agenda, boolean more, Listening stage) {
        // A cue by hand is due at an instant that has passed: when it is found.
        long agendaNanos = more ? Math.max(nowNanos, agenda.nextNanos()) : Lane.NEVER;
        Lane post = stage.post.next();
        long postNanos = post.nextNanos();
        long backendNanos = stage.backends.nextNanos();
        long balancerNanos = stage.balancer.nextNanos();
        nowNanos = Math.min(
                Math.min(Math.min(agendaNanos, postNanos), Math.min(backendNanos, balancerNanos)), nextSliceNanos);
        if (agendaNanos == nowNanos) {
            agenda.poll(nowNanos, stage.hands.at(nowNanos), MOST_AT_ONCE);
            stage.balancer.carryOut(nowNanos);
        } else if (postNanos == nowNanos) {
            stage.balancer.deliver(post, stage.backends, nowNanos);
        } else if (backendNanos == nowNanos) {
            stage.backends.poll(nowNanos);
        } else if (balancerNanos == nowNanos) {
            stage.balancer.poll(nowNanos);
        } else {
            sample(stage);
        }
    }

    private void sample(Listening stage) {
        for (int backend = 0; backend < sample.inFlight.length; backend++) {
            stage.balancer.read(backend, sample, nowNanos);
            Figures figures = stage.backends.figures(backend, nowNanos);
            sample.waiting[backend] = figures.waiting();
            sample.inService[backend] = figures.inService();
            sample.busyNanos[backend] = figures.busyWorkerNanos();
            sample.spentNanos[backend] = figures.waitNanos() + figures.serviceNanos();
            sample.heldNanos[backend] = figures.heldIntegralNanos();
        }
        for (int pool = 0; pool < sample.waitingForBackend.length; pool++) {
            sample.waitingForBackend[pool] = stage.balancer.waiting(pool);
        }
        stage.listener.sampled(nowNanos, sample);
        nextSliceNanos = sliceAt(nowNanos + SLICE_NANOS);
    }

    /** The end of a slice, or never where the play does not last that long. */
    private long sliceAt(long endNanos) {
        return endNanos > drill.lastsNanos() ? Lane.NEVER : endNanos;
    }

    @Override
    public void interrupt() {
        interrupted = true;
    }

    @Override
    public void close() {
        opened = null;
    }

    private Listening opened() {
        Listening stage = opened;
        if (stage == null) {
            throw new IllegalStateException("the stage is not open");
        }
        return stage;
    }
}
