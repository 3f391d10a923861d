package steelyard.harness.stage.virtual;

import java.util.List;
import java.util.Map;
import steelyard.backends.behave.Behaviour;
import steelyard.backends.behave.BehaviourSettings;
import steelyard.backends.behave.Chance;
import steelyard.backends.behave.Change;
import steelyard.backends.behave.Figures;
import steelyard.backends.behave.Reply;
import steelyard.backends.behave.ReplySink;

/** All behaviours of a play, and which of them has something planned first. */
final class VirtualBackends {

    /** Hears what backends do; token as given to {@link #arrive}. */
    interface Hearer {
        void replied(int backend, long token, long request, int attempt, Reply reply, int status, long atNanos);

        void probeReplied(int backend, long probe, Reply reply, int status, long atNanos);

        /** {@code gauges} by name; empty unless the page was answered. */
        void readingReplied(int backend, long reading, Reply reply, Map<String, Double> gauges, long atNanos);

        void connectionsReset(int backend, long atNanos);
    }

    /** Tokens of readings count down from here, below all those of probes. */
    private static final long AS_READING = -(1L << 48);

    private final Behaviour[] behaviours;
    private final Sink[] sinks;
    private final boolean[] killed;
    private final Deadlines deadlines;

    /** @param hearer hears everything from the first call on */
    VirtualBackends(List<BehaviourSettings> settings, Chance chance, Hearer hearer) {
        behaviours = new Behaviour[settings.size()];
        sinks = new Sink[behaviours.length];
        killed = new boolean[behaviours.length];
        deadlines = new Deadlines(behaviours.length);
        for (int backend = 0; backend < behaviours.length; backend++) {
            behaviours[backend] = new Behaviour(backend, settings.get(backend), chance, 0);
            sinks[backend] = new Sink(backend, hearer);
        }
    }

    long nextNanos() {
        return deadlines.first();
    }

    /** Does what the first backend has planned. */
    void poll(long nowNanos) {
        int backend = deadlines.whoIsFirst();
        behaviours[backend].poll(nowNanos, sinks[backend]);
        reschedule(backend);
    }

    int arrive(int backend, long token, long request, int attempt, long nowNanos) {
        int place = behaviours[backend].arrive(token, request, attempt, 0, nowNanos, sinks[backend]);
        reschedule(backend);
        return place;
    }

    void probe(int backend, long probe, long nowNanos) {
        behaviours[backend].probe(-1 - probe, probe, nowNanos, sinks[backend]);
        reschedule(backend);
    }

    /** The load page is asked for; {@code reading} as given. */
    void read(int backend, long reading, long nowNanos) {
        behaviours[backend].read(AS_READING - reading, reading, nowNanos, sinks[backend]);
        reschedule(backend);
    }

    void abandon(int backend, int place, long token, long nowNanos) {
        behaviours[backend].abandon(place, token, nowNanos, sinks[backend]);
        reschedule(backend);
    }

    void apply(int backend, Change change, long nowNanos) {
        switch (change.kind()) {
            case KILL -> killed[backend] = true;
            case REVIVE -> killed[backend] = false;
            case SLOW, FAIL, HANG, REFUSE, FAIL_PROBE, FLAP_PROBE, LOAD, FILL, HEAL -> {
                // None of these takes its connections away.
            }
        }
        behaviours[backend].apply(change, nowNanos, sinks[backend]);
        reschedule(backend);
    }

    boolean listening(int backend) {
        return behaviours[backend].listening();
    }

    boolean killed(int backend) {
        return killed[backend];
    }

    Figures figures(int backend, long nowNanos) {
        Figures figures = behaviours[backend].figures(nowNanos, sinks[backend]);
        reschedule(backend);
        return figures;
    }

    private void reschedule(int backend) {
        Behaviour behaviour = behaviours[backend];
        deadlines.set(backend, behaviour.hasDeadline() ? behaviour.nextDeadlineNanos() : Lane.NEVER);
    }

    /** Tells the hearer which backend it was. */
    private record Sink(int backend, Hearer hearer) implements ReplySink {
        @Override
        public void reply(long token, long request, int attempt, Reply reply, int status, int bodyBytes, long atNanos) {
            hearer.replied(backend, token, request, attempt, reply, status, atNanos);
        }

        @Override
        public void probeReply(long token, long probe, Reply reply, int status, long atNanos) {
            hearer.probeReplied(backend, probe, reply, status, atNanos);
        }

        @Override
        public void readingReply(
                long token, long reading, Reply reply, int status, Map<String, Double> gauges, long atNanos) {
            hearer.readingReplied(backend, reading, reply, gauges, atNanos);
        }

        @Override
        public void listening(boolean open, long atNanos) {
            // Asked for when a connection comes.
        }

        @Override
        public void connectionsReset(long atNanos) {
            hearer.connectionsReset(backend, atNanos);
        }
    }
}
