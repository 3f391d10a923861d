package steelyard.balancer.live.control;

import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.core.standing.Standing;
import steelyard.balancer.settings.BalancerSettings;

/** How often what was decided, by number of backend, pool or host. Not thread-safe. */
final class Figures {
    final long[] picks;
    final long[] nobody;
    final long[][] outcomes;
    final long[] retriesGranted;
    final long[] retriesDenied;
    final long[] probesPassed;
    final long[] probesMissed;
    final long[][] transitions;
    final long[] reweighs;
    final long[] hostReweighs;

    Figures(BalancerSettings settings) {
        int backends = settings.backends().size();
        int pools = settings.pools().size();
        picks = new long[backends];
        nobody = new long[pools];
        outcomes = new long[backends][Outcome.values().length];
        retriesGranted = new long[pools];
        retriesDenied = new long[pools];
        probesPassed = new long[backends];
        probesMissed = new long[backends];
        transitions = new long[backends][Standing.values().length];
        reweighs = new long[backends];
        hostReweighs = new long[settings.hosts().size()];
    }

    void copyFrom(Figures other) {
        copy(other.picks, picks);
        copy(other.nobody, nobody);
        copy(other.retriesGranted, retriesGranted);
        copy(other.retriesDenied, retriesDenied);
        copy(other.probesPassed, probesPassed);
        copy(other.probesMissed, probesMissed);
        copy(other.reweighs, reweighs);
        copy(other.hostReweighs, hostReweighs);
        for (int backend = 0; backend < picks.length; backend++) {
            copy(other.outcomes[backend], outcomes[backend]);
            copy(other.transitions[backend], transitions[backend]);
        }
    }

    private static void copy(long[] from, long[] to) {
        System.arraycopy(from, 0, to, 0, to.length);
    }
}
