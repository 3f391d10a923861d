package steelyard.drills.read;

import java.util.ArrayList;
import java.util.List;
import java.util.Set;
import java.util.stream.Collectors;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Cue;
import steelyard.drills.model.Expectation;
import steelyard.drills.model.Measure;
import steelyard.drills.model.Pool;
import steelyard.drills.model.Target;
import steelyard.drills.model.Traffic;

/** Turns drafts of expectations into expectations, and refuses those that can never be measured. */
final class ExpectationResolver {
    private final Problems problems;
    private final Roster roster;
    private final CueSchedule schedule;
    private final List<Cue> cues;
    private final Measurable measurable;
    private final Set<String> busyPools;
    private final long lastsNanos;

    ExpectationResolver(
            Problems problems,
            Roster roster,
            CueSchedule schedule,
            List<Cue> cues,
            List<Traffic> traffic,
            long lastsNanos) {
        this.problems = problems;
        this.roster = roster;
        this.schedule = schedule;
        this.cues = cues;
        this.measurable = new Measurable(problems, roster, cues, lastsNanos);
        this.busyPools = traffic.stream().map(Traffic::pool).collect(Collectors.toSet());
        this.lastsNanos = lastsNanos;
    }

    List<Expectation> resolve(List<ExpectationDraft> drafts) {
        List<Expectation> expectations = new ArrayList<>();
        for (ExpectationDraft draft : drafts) {
            Expectation expectation = draft.measure().countsFromCue() ? fromCue(draft) : overWindow(draft);
            if (expectation != null) {
                expectations.add(expectation);
            }
        }
        return expectations;
    }

    private @Nullable Expectation fromCue(ExpectationDraft draft) {
        TargetDraft ofDraft = draft.of();
        Target of = ofDraft == null ? null : roster.resolve(ofDraft, problems);
        Placed<String> after = draft.after();
        if (after == null || !schedule.knows(after)) {
            return null;
        }
        Cue cue = cues.stream()
                .filter(one -> one.name().equals(after.value()))
                .findFirst()
                .orElse(null);
        if (cue == null || (of == null && ofDraft != null)) {
            return null;
        }
        if (of == null && cue.kind().side() == Cue.Side.TRAFFIC) {
            problems.add(draft.place(), draft.measure().word() + " needs 'of'", "name a backend; the cue has none");
            return null;
        }
        Target target = of == null ? cue.target() : of;
        measurable.checkAfter(draft, target, cue);
        checkTraffic(draft, target);
        return build(draft, target, null, cue.atNanos(), lastsNanos, cue.name());
    }

    private @Nullable Expectation overWindow(ExpectationDraft draft) {
        Window window = window(draft);
        TargetDraft ofDraft = draft.of();
        if (ofDraft == null) {
            if (needsTarget(draft.measure())) {
                problems.add(
                        draft.place(),
                        draft.measure().word() + " needs 'of'",
                        "name a backend, a list, a host, a zone or a pool");
            }
            return window == null ? null : build(draft, null, null, window.from(), window.to(), null);
        }
        Target of = roster.resolve(ofDraft, problems);
        if (of == null) {
            return null;
        }
        boolean ofTraffic = looksAtRequests(draft.measure());
        if (ofTraffic && of.kind() != Target.Kind.POOL) {
            problems.add(
                    ofDraft.place(),
                    draft.measure().word() + " looks at requests, which have no backend of their own",
                    "write of: {pool: " + roster.poolOf(of.backends().get(0)).name() + "}, or leave it out");
        }
        measurable.checkOver(draft, of);
        checkTraffic(draft, of);
        return window == null
                ? null
                : build(draft, ofTraffic ? null : of, ofTraffic ? of.name() : null, window.from(), window.to(), null);
    }

    private static boolean needsTarget(Measure measure) {
        return measure == Measure.SHARE || measure == Measure.WEIGHT_LAG || measure == Measure.SWING;
    }

    private static boolean looksAtRequests(Measure measure) {
        return switch (measure) {
            case FAILED, LATENCY, LONGEST_OUTAGE, RETRY_LOAD -> true;
            case SHARE,
                    DETECTED_IN,
                    SHIFTED_IN,
                    SETTLED_IN,
                    DRAINED_IN,
                    CUT,
                    STANDING_CHANGES,
                    PEAK_IN_FLIGHT,
                    PEAK_UTILISATION,
                    FAIRNESS,
                    WEIGHT_LAG,
                    SWING -> false;
        };
    }

    private void checkTraffic(ExpectationDraft draft, Target target) {
        boolean needsTraffic = switch (draft.measure()) {
            case FAILED,
                    LATENCY,
                    LONGEST_OUTAGE,
                    RETRY_LOAD,
                    SHARE,
                    SHIFTED_IN,
                    SETTLED_IN,
                    FAIRNESS,
                    WEIGHT_LAG,
                    SWING -> true;
            case DETECTED_IN, DRAINED_IN, CUT, STANDING_CHANGES, PEAK_IN_FLIGHT, PEAK_UTILISATION -> false;
        };
        Set<Pool> pools = roster.poolsOf(target);
        if (needsTraffic && pools.stream().noneMatch(pool -> busyPools.contains(pool.name()))) {
            String name = pools.iterator().next().name();
            problems.add(
                    draft.place(),
                    draft.measure().word() + " can never be measured: no traffic goes to pool '" + name + "'",
                    "send traffic to it, or drop the expectation");
        }
    }

    private @Nullable Window window(ExpectationDraft draft) {
        Instant from = draft.from();
        Instant to = draft.to();
        Long begins = from == null ? Long.valueOf(0) : schedule.nanos(from);
        Long ends = to == null ? Long.valueOf(lastsNanos) : schedule.nanos(to);
        if (begins == null || ends == null) {
            return null;
        }
        Place fromPlace = from == null ? draft.place() : from.place();
        Place toPlace = to == null ? draft.place() : to.place();
        String span = Durations.text(begins) + " to " + Durations.text(ends);
        if (begins < 0) {
            problems.add(
                    fromPlace, "the window begins before the play, at " + Durations.text(begins), "write at least 0s");
        } else if (ends > lastsNanos) {
            problems.add(
                    toPlace,
                    "the window ends after the play, at " + Durations.text(ends),
                    "the play lasts " + Durations.text(lastsNanos));
        } else if (begins >= ends) {
            problems.add(
                    from == null ? toPlace : fromPlace,
                    "the window is empty: " + span,
                    "write an earlier from or a later to");
        } else {
            checkWorst(draft, ends - begins);
            return new Window(begins, ends);
        }
        return null;
    }

    private void checkWorst(ExpectationDraft draft, long windowNanos) {
        Place worst = draft.worst();
        if (worst != null && draft.options().worstNanos() > windowNanos) {
            problems.add(worst, "the window is shorter than that", "write at most " + Durations.text(windowNanos));
        }
    }

    private @Nullable Expectation build(
            ExpectationDraft draft,
            @Nullable Target of,
            @Nullable String pool,
            long fromNanos,
            long toNanos,
            @Nullable String after) {
        // A key that the measure does not know was noted; the record would refuse what it led to.
        return problems.any()
                ? null
                : new Expectation(draft.measure(), of, pool, fromNanos, toNanos, after, draft.options(), draft.bound());
    }

    private record Window(long from, long to) {}
}
