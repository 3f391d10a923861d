package steelyard.balancer.core.decide;

import steelyard.balancer.core.standing.BackendStanding;
import steelyard.balancer.core.standing.ProbeTracker;
import steelyard.balancer.core.standing.Standing;
import steelyard.balancer.settings.ProbeSettings;

/** Orders probes as they are due and takes over what they say. */
final class Probing {
    private final Roster roster;

    Probing(Roster roster) {
        this.roster = roster;
    }

    /** Does one thing that a backend's probes have due. */
    void poll(int backend, long nowNanos) {
        BackendStanding standing = roster.standing(backend);
        Standing before = standing.shown();
        ProbeTracker.Step step = standing.pollProbes(nowNanos);
        ProbeTracker probes = standing.probes();
        if (probes == null) {
            return;
        }
        switch (step) {
            case NOTHING -> {}
            case START -> roster.orders.startProbe(backend, probes.number());
            case DROP -> {
                roster.orders.dropProbe(backend, probes.number());
                roster.sink.probed(nowNanos, backend, probes.number(), false);
                roster.stood(backend, standing.afterProbe(before, nowNanos), nowNanos);
            }
        }
    }

    void answered(int backend, long probe, boolean good, long nowNanos) {
        BackendStanding standing = roster.standing(backend);
        ProbeTracker probes = standing.probes();
        if (probes == null) {
            return;
        }
        Standing before = standing.shown();
        boolean passes = good && probes.passesAt(nowNanos);
        if (probes.answered(probe, good, nowNanos)) {
            roster.sink.probed(nowNanos, backend, probe, passes);
            roster.stood(backend, standing.afterProbe(before, nowNanos), nowNanos);
            roster.reschedule(backend, nowNanos);
        }
    }

    void retune(int pool, ProbeSettings settings, long nowNanos) {
        for (int backend = roster.firstOf(pool); backend < roster.endOf(pool); backend++) {
            roster.standing(backend).retune(settings, nowNanos);
            roster.reschedule(backend, nowNanos);
        }
    }
}
