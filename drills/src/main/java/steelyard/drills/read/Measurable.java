package steelyard.drills.read;

import java.util.List;
import java.util.Set;
import java.util.function.Predicate;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Backend;
import steelyard.drills.model.Cue;
import steelyard.drills.model.Measure;
import steelyard.drills.model.Pool;
import steelyard.drills.model.Standing;
import steelyard.drills.model.Target;

/** Finds expectations that no play of the drill could ever measure, or that hold whatever happens. */
final class Measurable {
    private final Problems problems;
    private final Roster roster;
    private final List<Cue> cues;
    private final long lastsNanos;

    /** With the cues in order of their instant. */
    Measurable(Problems problems, Roster roster, List<Cue> cues, long lastsNanos) {
        this.problems = problems;
        this.roster = roster;
        this.cues = cues;
        this.lastsNanos = lastsNanos;
    }

    /** Checks an expectation that counts from a cue. */
    void checkAfter(ExpectationDraft draft, Target target, Cue cue) {
        switch (draft.measure()) {
            case DETECTED_IN -> detected(draft, target, cue);
            case DRAINED_IN -> {
                if (cue.kind() != Cue.Kind.DRAIN) {
                    never(draft, "'" + cue.name() + "' is no drain", "name a drain cue");
                }
            }
            case SETTLED_IN -> settled(draft, target, cue);
            case SHIFTED_IN -> shifted(draft, target, cue);
            case FAILED,
                    LONGEST_OUTAGE,
                    LATENCY,
                    SHARE,
                    CUT,
                    STANDING_CHANGES,
                    RETRY_LOAD,
                    PEAK_IN_FLIGHT,
                    PEAK_UTILISATION,
                    FAIRNESS,
                    WEIGHT_LAG,
                    SWING -> {}
        }
    }

    /** Checks an expectation over a window. */
    void checkOver(ExpectationDraft draft, Target target) {
        Measure measure = draft.measure();
        if (measure == Measure.SHARE
                && target.kind() == Target.Kind.BACKENDS
                && pools(target).size() > 1) {
            never(draft, "the backends are of several pools", "name backends of one pool, or a host or a zone");
        } else if (measure == Measure.SHARE && wholePool(target)) {
            always(draft, "100 %, since it names the whole pool", "name some of its backends");
        } else if (measure == Measure.FAIRNESS && target.backends().size() == 1) {
            always(draft, "1 for a single backend", "name several, or leave out of");
        } else if (measure == Measure.RETRY_LOAD && pools(target).stream().allMatch(pool -> pool.retry() == null)) {
            always(draft, "1 in a pool without retry", "write retry: {at-most: 1} for the pool");
        } else if (measure == Measure.CUT && cues.stream().noneMatch(cue -> cue.kind() == Cue.Kind.DRAIN)) {
            always(draft, "0 without a drain cue", "add one, or drop the expectation");
        } else if (measure == Measure.WEIGHT_LAG || measure == Measure.SWING) {
            ofLoad(draft, target);
        }
    }

    /** Both are counted in periods of load probes; the lag is one of weights that follow them. */
    private void ofLoad(ExpectationDraft draft, Target target) {
        Pool without = first(target, pool -> pool.health().load() == null || pool.weights() != Pool.Weights.LOAD);
        if (without != null) {
            never(
                    draft,
                    "pool '" + without.name() + "' has no load weights",
                    "write weights: load, and load: {every: 1s} for the pool");
        } else if (draft.measure() == Measure.SWING && wholePool(target)) {
            always(draft, "0 %, since it names the whole pool", "name some of its backends");
        }
    }

    private void settled(ExpectationDraft draft, Target target, Cue cue) {
        Set<Pool> pools = pools(target);
        if (pools.stream().anyMatch(pool -> pool.weights() == Pool.Weights.HOST)) {
            never(draft, "under weights: host the shares of a pool have no set value", "use share instead");
        }
        if (pools.stream().anyMatch(pool -> pool.weights() == Pool.Weights.LOAD)) {
            never(draft, "under weights: load the shares of a pool have no set value", "use share instead");
        }
        if (pools.stream().anyMatch(pool -> pool.method() == Pool.Method.HASH)) {
            never(draft, "under method: hash the keys that come make the shares", "use share instead");
        }
        if (pools.stream().anyMatch(pool -> pool.picking().affinity() != null)) {
            never(draft, "under affinity the clients that come make the shares", "use share instead");
        }
        room(
                draft,
                cue,
                other -> other.target().backends().stream().map(roster::poolOf).anyMatch(pools::contains));
    }

    private void shifted(ExpectationDraft draft, Target target, Cue cue) {
        if (wholePool(target)) {
            never(draft, "all attempts of the pool go to its own backends", "name some of its backends");
        }
        room(draft, cue, other -> other.target().backends().stream().anyMatch(target.backends()::contains));
    }

    /** Shares are looked at second by second, up to the next cue that acts on them; there has to be one second. */
    private void room(ExpectationDraft draft, Cue cue, Predicate<Cue> actsOnThem) {
        long since = cue.atNanos();
        Cue next = cues.stream()
                .filter(other -> other.atNanos() > since && other.kind().side() != Cue.Side.TRAFFIC)
                .filter(actsOnThem)
                .findFirst()
                .orElse(null);
        long room = (next == null ? lastsNanos : next.atNanos()) - since;
        if (room < Durations.SECOND) {
            String end = next == null ? "the end of the play" : "'" + next.name() + "'";
            never(
                    draft,
                    end + " comes only " + Durations.text(room) + " after the cue",
                    "leave 1s between them at least");
        }
    }

    private void detected(ExpectationDraft draft, Target target, Cue cue) {
        Standing until = draft.options().until();
        boolean byHand = cue.kind().side() == Cue.Side.BALANCER;
        boolean benches = until == null && first(target, pool -> pool.health().bench() == null) == null;
        boolean wantsProbe = until == Standing.DOWN || (!byHand && !benches && (until == null || until == Standing.UP));
        Pool without = first(target, pool -> pool.probe() == null);
        Pool cold = first(target, pool -> pool.warmUp() == null);
        Pool benchless = first(target, pool -> pool.health().bench() == null);
        if (wantsProbe && without != null) {
            never(draft, "pool '" + without.name() + "' has no probe", "write probe: {path: /afloat} for the pool");
        } else if (until == Standing.BENCHED && benchless != null) {
            never(draft, "pool '" + benchless.name() + "' has no bench", "write bench: {after: 4} for the pool");
        } else if (until == Standing.WARMING && cold != null) {
            never(draft, "pool '" + cold.name() + "' has no warm-up", "write warm-up: 5s for the pool");
        } else if (wantsProbe && (cue.kind() == Cue.Kind.LOAD || cue.kind() == Cue.Kind.FILL)) {
            never(draft, "probes do not see " + cue.kind().word(), "a gauge moves weights: use share or weight-lag");
        } else if (wantsProbe && !probesSee(cue)) {
            never(
                    draft,
                    "probes do not see " + cue.kind().word(),
                    "write probes: true for the cue, or probe-work: queued for its backends");
        }
    }

    /** Whether probes can fail because of a cue: a slow or failing backend still answers them unless told otherwise. */
    private boolean probesSee(Cue cue) {
        return switch (cue.kind()) {
            case SLOW, FAIL -> cue.settings().probes() || anyQueues(cue.target());
            case SURGE -> anyQueues(cue.target());
            case HANG,
                    REFUSE,
                    KILL,
                    REVIVE,
                    FAIL_PROBE,
                    FLAP_PROBE,
                    LOAD,
                    FILL,
                    HEAL,
                    REWEIGH,
                    DRAIN,
                    ADMIT,
                    WITHDRAW,
                    RETUNE -> true;
        };
    }

    private boolean anyQueues(Target target) {
        return pools(target).stream()
                .flatMap(pool -> pool.backends().stream())
                .filter(backend -> target.backends().contains(backend.name()))
                .map(Backend::serves)
                .anyMatch(serves -> serves.probesQueue());
    }

    private boolean wholePool(Target target) {
        return pools(target).stream()
                .allMatch(pool -> pool.backends().stream().map(Backend::name).allMatch(target.backends()::contains));
    }

    private @Nullable Pool first(Target target, Predicate<Pool> odd) {
        return pools(target).stream().filter(odd).findFirst().orElse(null);
    }

    private Set<Pool> pools(Target target) {
        return roster.poolsOf(target);
    }

    private void never(ExpectationDraft draft, String why, String remedy) {
        problems.add(draft.place(), draft.measure().word() + " can never be measured: " + why, remedy);
    }

    private void always(ExpectationDraft draft, String what, String remedy) {
        problems.notice(draft.place(), draft.measure().word() + " is always " + what, remedy);
    }
}
