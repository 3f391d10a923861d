package steelyard.harness.conduct;

import java.util.Optional;
import java.util.stream.Collectors;
import java.util.stream.IntStream;
import steelyard.backends.behave.Change;
import steelyard.drills.model.Cue;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Pool;
import steelyard.drills.model.Retune;
import steelyard.drills.model.Target;
import steelyard.harness.record.Cast;
import steelyard.harness.stage.Hands;
import steelyard.harness.stage.Retuned;
import steelyard.harness.traffic.ArrivalPlan;

/** Turns cues, and the ends of their {@code for:}, into calls of hands. */
final class CueActions {
    private final Cast cast;
    private final String[] poolOfTraffic;
    private final ArrivalPlan arrivals;
    private final Retuned retuned;
    private final Terms faults;
    private final Terms surges;
    private final Absent absent;

    CueActions(Drill drill, ArrivalPlan arrivals) {
        this.cast = new Cast(drill);
        this.poolOfTraffic = drill.traffic().stream().map(each -> each.pool()).toArray(String[]::new);
        this.arrivals = arrivals;
        this.retuned = new Retuned(drill);
        this.faults = new Terms(cast.backends().size());
        this.surges = new Terms(poolOfTraffic.length);
        this.absent = new Absent();
    }

    /**
     * Checks that a cue can be carried out on this stage.
     *
     * @throws IllegalArgumentException for an unknown backend or settings that mean nothing
     */
    void check(Cue cue) {
        cast.numbers(cue.target());
        if (cue.kind().side() == Cue.Side.BACKEND) {
            Changes.of(cue);
        }
    }

    /** Carries a cue out; {@code number} tells it from all others of the play. */
    void carryOut(Cue cue, int number, long atNanos, Hands hands) {
        switch (cue.kind()) {
            case SLOW, FAIL, HANG, REFUSE, KILL, REVIVE, FAIL_PROBE, FLAP_PROBE, LOAD, FILL, HEAL ->
                change(cue, number, Changes.of(cue), hands);
            case REWEIGH -> reweigh(cue.target(), cue.settings().weight(), hands);
            case DRAIN ->
                backends(cue).forEach(each -> hands.drain(each, cue.settings().limitNanos()));
            case ADMIT -> backends(cue).forEach(hands::admit);
            case WITHDRAW -> backends(cue).forEach(hands::withdraw);
            case RETUNE -> retune(cue, hands);
            case SURGE -> surge(cue, number, atNanos);
        }
        backends(cue).forEach(each -> absent.carriedOut(cue.kind(), each));
    }

    /** Why a cue would change nothing, in words; empty for one that would, or of which that is not known. Any thread. */
    Optional<String> idle(Cue cue) {
        boolean revive = cue.kind() == Cue.Kind.REVIVE;
        if (!revive && cue.kind() != Cue.Kind.ADMIT) {
            return Optional.empty();
        }
        int[] named = cast.numbers(cue.target());
        if (IntStream.of(named).anyMatch(each -> revive ? absent.killed(each) : absent.out(each))) {
            return Optional.empty();
        }
        String names = IntStream.of(named)
                .mapToObj(each -> cast.backends().get(each).name())
                .collect(Collectors.joining(", "));
        boolean one = named.length == 1;
        return Optional.of(
                names + (revive ? (one ? " was" : " were") + " not killed" : (one ? " is" : " are") + " not out"));
    }

    /** Whether anything that a cue set still stands, so that there is something to end. */
    boolean stands(Cue cue, int number) {
        return left(cue, number).length > 0;
    }

    /** Ends what a cue set, where it still stands. */
    void end(Cue cue, int number, long atNanos, Hands hands) {
        if (cue.kind() == Cue.Kind.SURGE) {
            endSurge(cue, number, atNanos);
        } else {
            endFault(cue, number, hands);
        }
    }

    /** Streams of a surge, otherwise backends, of which the cue still has the say. */
    private int[] left(Cue cue, int number) {
        boolean surge = cue.kind() == Cue.Kind.SURGE;
        Terms terms = surge ? surges : faults;
        return (surge ? streams(cue.target()) : backends(cue))
                .filter(each -> terms.holds(cue.kind(), number, each))
                .toArray();
    }

    private void change(Cue cue, int number, Change change, Hands hands) {
        backends(cue).forEach(backend -> {
            faults.carriedOut(cue.kind(), number, backend);
            hands.change(backend, change);
        });
    }

    private void endFault(Cue cue, int number, Hands hands) {
        Change end = Changes.end(cue.kind());
        for (int backend : left(cue, number)) {
            faults.ended(cue.kind(), backend);
            if (cue.kind() == Cue.Kind.KILL) {
                absent.carriedOut(Cue.Kind.REVIVE, backend);
            }
            hands.change(backend, end);
        }
    }

    private void surge(Cue cue, int number, long atNanos) {
        streams(cue.target()).forEach(stream -> {
            surges.carriedOut(cue.kind(), number, stream);
            arrivals.surge(stream, cue.settings().factor(), atNanos);
        });
    }

    private void endSurge(Cue cue, int number, long atNanos) {
        for (int stream : left(cue, number)) {
            surges.ended(cue.kind(), stream);
            arrivals.surge(stream, 1, atNanos);
        }
    }

    private void retune(Cue cue, Hands hands) {
        Retune change = cue.settings().retune();
        if (change == null) {
            throw new IllegalArgumentException("a retune says what changes");
        }
        backends(cue).map(cast::poolOf).distinct().forEach(pool -> retuned.apply(pool, change, hands));
    }

    /** A host is reweighed itself where a pool on it counts weights by host; all else is reweighed backend by backend. */
    private void reweigh(Target target, int weight, Hands hands) {
        if (target.kind() == Target.Kind.HOST && countsByHost(target)) {
            hands.reweighHost(cast.hostNumber(target.name()), weight);
        } else {
            for (int backend : cast.numbers(target)) {
                hands.reweigh(backend, weight);
            }
        }
    }

    private boolean countsByHost(Target host) {
        return IntStream.of(cast.numbers(host))
                .anyMatch(each -> cast.pools().get(cast.poolOf(each)).weights() == Pool.Weights.HOST);
    }

    private IntStream backends(Cue cue) {
        return IntStream.of(cast.numbers(cue.target()));
    }

    /** The streams that go to a pool of the target's backends. */
    private IntStream streams(Target target) {
        return IntStream.range(0, poolOfTraffic.length)
                .filter(stream -> IntStream.of(cast.numbers(target))
                        .anyMatch(each -> cast.poolOf(each) == cast.poolNumber(poolOfTraffic[stream])));
    }
}
