package steelyard.harness.judge;

import java.util.Arrays;
import steelyard.balancer.core.standing.Standing;
import steelyard.balancer.core.standing.Transition;
import steelyard.drills.model.Cue;
import steelyard.harness.record.Cast;
import steelyard.harness.record.PlayListener.By;

/**
 * Who should be served from, whatever the balancer has noticed: the set weights of the backends that are admitted and
 * can truly serve. A backend cannot after a kill, refuse or hang until revive, heal or the end of the fault.
 */
final class Truth {
    private final Cast cast;
    private final int[] weight;
    private final boolean[] outByHand;
    private final boolean[] killed;
    private final boolean[] refusing;
    private final boolean[] hanging;

    Truth(Cast cast) {
        this.cast = cast;
        int backends = cast.backends().size();
        weight = new int[backends];
        Arrays.setAll(weight, b -> weighs(b) ? cast.backends().get(b).weight() : 1);
        outByHand = new boolean[backends];
        killed = new boolean[backends];
        refusing = new boolean[backends];
        hanging = new boolean[backends];
    }

    /** The weight that a backend should be served by now; 0 for one that is not admitted or cannot serve. */
    int weight(int backend) {
        boolean asked = cast.backends().get(backend).tier() == 1 || tooFewOfTierOne(cast.poolOf(backend));
        return asked && serves(backend) ? weight[backend] : 0;
    }

    private boolean serves(int backend) {
        return !outByHand[backend] && !killed[backend] && !refusing[backend] && !hanging[backend];
    }

    /** Backends of tier 2 stand by while a set share of tier 1 is there. */
    private boolean tooFewOfTierOne(int pool) {
        int all = 0;
        int serving = 0;
        for (int backend = 0; backend < weight.length; backend++) {
            if (cast.poolOf(backend) == pool && cast.backends().get(backend).tier() == 1) {
                all++;
                serving += serves(backend) ? 1 : 0;
            }
        }
        return serving < cast.pools().get(pool).reserve().standby() * all;
    }

    void stood(Transition transition) {
        // Both words are shown before all others, so the shown word tells the hand's fact.
        outByHand[transition.backend()] = transition.to() == Standing.DRAINING || transition.to() == Standing.WITHDRAWN;
    }

    void reweighed(int backend, int newWeight) {
        if (weighs(backend)) {
            weight[backend] = newWeight;
        }
    }

    void applied(Cue cue, By by) {
        for (int backend : cast.numbers(cue.target())) {
            if (by == By.END) {
                end(cue.kind(), backend);
            } else {
                apply(cue.kind(), backend);
            }
        }
    }

    private void apply(Cue.Kind kind, int backend) {
        switch (kind) {
            case KILL -> killed[backend] = true;
            case REFUSE -> refusing[backend] = true;
            case HANG -> hanging[backend] = true;
            case REVIVE -> revive(backend);
            case HEAL -> heal(backend);
            case SLOW, FAIL, FAIL_PROBE, FLAP_PROBE, REWEIGH, DRAIN, ADMIT, WITHDRAW, LOAD, FILL, RETUNE, SURGE -> {}
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

    private boolean weighs(int backend) {
        return cast.pools().get(cast.poolOf(backend)).method().weighs();
    }
}
