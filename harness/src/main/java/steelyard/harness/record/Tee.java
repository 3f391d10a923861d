package steelyard.harness.record;

import java.util.List;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.core.standing.Transition;
import steelyard.drills.model.Cause;
import steelyard.drills.model.Cue;

/** Tells every event to several listeners, in the order in which they were given. */
public final class Tee implements PlayListener {
    private final PlayListener[] listeners;

    public Tee(PlayListener... listeners) {
        this.listeners = listeners.clone();
    }

    public Tee(List<? extends PlayListener> listeners) {
        this.listeners = listeners.toArray(PlayListener[]::new);
    }

    @Override
    public void requestDue(long atNanos, long request, int traffic, int kind, int client) {
        for (PlayListener each : listeners) {
            each.requestDue(atNanos, request, traffic, kind, client);
        }
    }

    @Override
    public void requestSent(long atNanos, long request, long dueNanos) {
        for (PlayListener each : listeners) {
            each.requestSent(atNanos, request, dueNanos);
        }
    }

    @Override
    public void requestEnded(
            long atNanos, long request, long dueNanos, int traffic, int kind, @Nullable Cause cause, int status) {
        for (PlayListener each : listeners) {
            each.requestEnded(atNanos, request, dueNanos, traffic, kind, cause, status);
        }
    }

    @Override
    public void tunnelEnded(
            long atNanos,
            long openedNanos,
            long request,
            long dueNanos,
            int traffic,
            int kind,
            @Nullable Cause cause,
            int status) {
        for (PlayListener each : listeners) {
            each.tunnelEnded(atNanos, openedNanos, request, dueNanos, traffic, kind, cause, status);
        }
    }

    @Override
    public void connectionCapHit(long atNanos) {
        for (PlayListener each : listeners) {
            each.connectionCapHit(atNanos);
        }
    }

    @Override
    public void attemptPicked(long atNanos, int pool, int backend, long request, int attempt, int inFlight) {
        for (PlayListener each : listeners) {
            each.attemptPicked(atNanos, pool, backend, request, attempt, inFlight);
        }
    }

    @Override
    public void attemptEnded(
            long atNanos, int backend, long request, int attempt, Outcome outcome, int status, int inFlight) {
        for (PlayListener each : listeners) {
            each.attemptEnded(atNanos, backend, request, attempt, outcome, status, inFlight);
        }
    }

    @Override
    public void nobodyPicked(long atNanos, int pool, long request, int attempt) {
        for (PlayListener each : listeners) {
            each.nobodyPicked(atNanos, pool, request, attempt);
        }
    }

    @Override
    public void retryAsked(long atNanos, int pool, long request, int attempt, boolean granted) {
        for (PlayListener each : listeners) {
            each.retryAsked(atNanos, pool, request, attempt, granted);
        }
    }

    @Override
    public void probed(long atNanos, int backend, long probe, boolean passed) {
        for (PlayListener each : listeners) {
            each.probed(atNanos, backend, probe, passed);
        }
    }

    @Override
    public void loadRead(long atNanos, int backend, long number, int headroomMilli, boolean fresh) {
        for (PlayListener each : listeners) {
            each.loadRead(atNanos, backend, number, headroomMilli, fresh);
        }
    }

    @Override
    public void waited(long atNanos, int pool, long request, int waiting) {
        for (PlayListener each : listeners) {
            each.waited(atNanos, pool, request, waiting);
        }
    }

    @Override
    public void stood(Transition transition) {
        for (PlayListener each : listeners) {
            each.stood(transition);
        }
    }

    @Override
    public void reweighed(long atNanos, boolean host, int number, int weight) {
        for (PlayListener each : listeners) {
            each.reweighed(atNanos, host, number, weight);
        }
    }

    @Override
    public void backendReceived(long atNanos, int backend, long request, int attempt) {
        for (PlayListener each : listeners) {
            each.backendReceived(atNanos, backend, request, attempt);
        }
    }

    @Override
    public void backendEnded(long atNanos, int backend, long request, int attempt, boolean inFull, int status) {
        for (PlayListener each : listeners) {
            each.backendEnded(atNanos, backend, request, attempt, inFull, status);
        }
    }

    @Override
    public void cueApplied(long atNanos, long dueNanos, Cue cue, By by) {
        for (PlayListener each : listeners) {
            each.cueApplied(atNanos, dueNanos, cue, by);
        }
    }

    @Override
    public void sampled(long atNanos, Sample sample) {
        for (PlayListener each : listeners) {
            each.sampled(atNanos, sample);
        }
    }

    @Override
    public void interrupted(long atNanos) {
        for (PlayListener each : listeners) {
            each.interrupted(atNanos);
        }
    }

    @Override
    public void ended(long atNanos, boolean complete) {
        for (PlayListener each : listeners) {
            each.ended(atNanos, complete);
        }
    }
}
