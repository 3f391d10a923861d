package steelyard.harness.judge;

import java.util.Arrays;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.standing.Standing;
import steelyard.balancer.core.standing.Transition;
import steelyard.drills.model.Cue;
import steelyard.drills.model.Retune;
import steelyard.harness.record.Cast;
import steelyard.harness.record.PlayListener.By;

/**
 * Who should be served from, whatever the balancer has noticed: the set weights of the backends that are admitted and
 * can truly serve, all alike under a method that does not weigh. A backend cannot after a kill, refuse or hang until
 * revive, heal or the end of the fault.
 */
final class Truth {
    /** Shares are compared with whole counts, as the balancer does; what decimal fractions lose in binary must not decide. */
    private static final double SLACK = 1e-9;

    private final Cast cast;
    private final int[] set;
    /** By backend: whether set weights play a part in the method that its pool goes by now. */
    private final boolean[] weighs;

    private final boolean[] outByHand;
    private final boolean[] killed;
    private final boolean[] refusing;
    private final boolean[] hanging;

    Truth(Cast cast) {
        this.cast = cast;
        int backends = cast.backends().size();
        set = new int[backends];
        Arrays.setAll(set, backend -> cast.backends().get(backend).weight());
        weighs = new boolean[backends];
        for (int backend = 0; backend < backends; backend++) {
            weighs[backend] = cast.pools().get(cast.poolOf(backend)).method().weighs();
        }
        outByHand = new boolean[backends];
        killed = new boolean[backends];
        refusing = new boolean[backends];
        hanging = new boolean[backends];
    }

    /** The weight that a backend should be served by now; 0 for one that is not admitted or cannot serve. */
    int weight(int backend) {
        boolean asked = cast.backends().get(backend).tier() == 1 || tooFewOfTierOne(cast.poolOf(backend));
        int full = weighs[backend] ? set[backend] : 1;
        return asked && serves(backend) ? full : 0;
    }

    private boolean serves(int backend) {
        return !outByHand[backend] && !killed[backend] && !refusing[backend] && !hanging[backend];
    }

    /** Backends of tier 2 stand by while a set share of tier 1 is there. */
    private boolean tooFewOfTierOne(int pool) {
        int all = 0;
        int serving = 0;
        for (int backend = 0; backend < set.length; backend++) {
            if (cast.poolOf(backend) == pool && cast.backends().get(backend).tier() == 1) {
                all++;
                serving += serves(backend) ? 1 : 0;
            }
        }
        return serving < cast.pools().get(pool).reserve().standby() * all - SLACK;
    }

    void stood(Transition transition) {
        // Both words are shown before all others, so the shown word tells the hand's fact.
        outByHand[transition.backend()] = transition.to() == Standing.DRAINING || transition.to() == Standing.WITHDRAWN;
    }

    void reweighed(int backend, int newWeight) {
        set[backend] = newWeight;
    }

    void applied(Cue cue, By by) {
        for (int backend : cast.numbers(cue.target())) {
            if (by == By.END) {
                end(cue.kind(), backend);
            } else {
                apply(cue, backend);
            }
        }
    }

    private void apply(Cue cue, int backend) {
        switch (cue.kind()) {
            case KILL -> killed[backend] = true;
            case REFUSE -> refusing[backend] = true;
            case HANG -> hanging[backend] = true;
            case REVIVE -> revive(backend);
            case HEAL -> heal(backend);
            case RETUNE -> retune(cue.settings().retune(), backend);
            case SLOW, FAIL, FAIL_PROBE, FLAP_PROBE, REWEIGH, DRAIN, ADMIT, WITHDRAW, LOAD, FILL, SURGE -> {}
        }
    }

    private void end(Cue.Kind kind, int backend) {
        switch (kind) {
            case KILL -> revive(backend);
            case REFUSE -> refusing[backend] = false;
            case HANG -> hanging[backend] = false;
            case SLOW,
                    FAIL,
                    FAIL_PROBE,
                    FLAP_PROBE,
                    REVIVE,
                    HEAL,
                    REWEIGH,
                    DRAIN,
                    ADMIT,
                    WITHDRAW,
                    LOAD,
                    FILL,
                    RETUNE,
                    SURGE -> {}
        }
    }

    /** A process that starts again has no faults; one that runs keeps those that it has. */
    private void revive(int backend) {
        if (killed[backend]) {
            killed[backend] = false;
            heal(backend);
        }
    }

    private void heal(int backend) {
        refusing[backend] = false;
        hanging[backend] = false;
    }

    private void retune(@Nullable Retune change, int backend) {
        if (change != null && change.method() != null) {
            weighs[backend] = change.method().weighs();
        }
    }
}
