package steelyard.drills.read;

import java.util.ArrayList;
import java.util.Collections;
import java.util.Comparator;
import java.util.HashMap;
import java.util.IdentityHashMap;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Set;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Cue;
import steelyard.drills.model.Retune;
import steelyard.drills.model.Serves;
import steelyard.drills.model.Target;

/** Turns drafts of cues into cues: names, instants that count from other cues, repeats, targets. */
final class CueSchedule {
    private static final int MOST = 10_000;

    private final Problems problems;
    private final Roster roster;
    private final long lastsNanos;

    /** Every name that an instant may count from; for a draft that could not be read, no instant. */
    private final Map<String, Named> names = new LinkedHashMap<>();

    private final Map<CueDraft, Start> starts = new IdentityHashMap<>();
    private final Map<String, Integer> used = new HashMap<>();
    private final List<Placed<Cue>> placed = new ArrayList<>();

    /** With the cues that are there already, and the length of the play. */
    CueSchedule(Problems problems, Roster roster, List<Cue> there, long lastsNanos) {
        this.problems = problems;
        this.roster = roster;
        this.lastsNanos = lastsNanos;
        for (Cue cue : there) {
            names.put(cue.name(), new Named(null, cue.atNanos(), Place.START));
        }
    }

    /** The cues, by instant; what cannot be placed or has no target is noted and left out. */
    List<Cue> schedule(List<CueDraft> drafts) {
        if (drafts.stream().mapToLong(CueDraft::times).sum() > MOST) {
            problems.add(drafts.get(0).place(), "more than " + MOST + " cues, repeats counted", "play fewer");
            return List.of();
        }
        drafts.forEach(this::enterNames);
        List<Cue> cues = new ArrayList<>();
        for (CueDraft draft : drafts) {
            build(draft, cues);
        }
        cues.sort(Comparator.comparingLong(Cue::atNanos));
        return cues;
    }

    /** The cues that were scheduled, each with the place of its draft. */
    List<Placed<Cue>> placed() {
        return placed;
    }

    private void enterNames(CueDraft draft) {
        Placed<String> name = draft.name();
        for (int i = 0; name != null && i < draft.times(); i++) {
            String repeat = CueDraft.repeat(name.value(), i);
            Named first = names.putIfAbsent(repeat, new Named(draft, i * draft.everyNanos(), name.place()));
            if (first != null) {
                String where = first.draft() == null
                        ? "the drill has it"
                        : "the first is on line " + first.place().line();
                problems.add(name.place(), "a cue named '" + repeat + "' is there twice", "rename one; " + where);
            }
        }
    }

    private void build(CueDraft draft, List<Cue> cues) {
        Long start = start(draft);
        TargetDraft targetDraft = draft.target();
        Target target = targetDraft == null ? null : roster.resolve(targetDraft, problems);
        Cue.Kind kind = draft.kind();
        if (start == null || !inside(draft, start) || target == null || kind == null) {
            return;
        }
        noticeUnseen(draft, kind, target);
        checkChange(draft, kind, target);
        Placed<String> name = draft.name();
        for (int i = 0; i < draft.times(); i++) {
            String called = name == null ? free(kind.word() + " " + target.text()) : CueDraft.repeat(name.value(), i);
            long at = start + i * draft.everyNanos();
            Cue cue = new Cue(called, at, kind, target, draft.settings(), draft.forNanos());
            cues.add(cue);
            placed.add(new Placed<>(draft.place(), cue));
        }
    }

    private void noticeUnseen(CueDraft draft, Cue.Kind kind, Target target) {
        boolean ofProbes = kind == Cue.Kind.FAIL_PROBE || kind == Cue.Kind.FLAP_PROBE;
        if (ofProbes && roster.poolsOf(target).stream().allMatch(pool -> pool.probe() == null)) {
            problems.notice(
                    draft.place(),
                    kind.word() + " does nothing in a pool without probes",
                    "write probe: {path: /afloat} for the pool");
        }
    }

    /** What a cue changes has to be there to be changed. */
    private void checkChange(CueDraft draft, Cue.Kind kind, Target target) {
        Retune retune = draft.settings().retune();
        if (retune != null) {
            roster.poolsOf(target).forEach(pool -> new RetuneReader(problems).check(retune, pool, draft.place()));
        }
        GaugeChecks gauges = new GaugeChecks(problems, roster);
        String gauge = draft.settings().gauge();
        if (kind == Cue.Kind.LOAD && gauge != null) {
            gauges.refuseUnknown(draft.place(), gauge, target);
        }
        if (kind == Cue.Kind.FILL) {
            gauges.noticeUncounted(draft.place(), kind.word(), Serves.DISK, target);
        }
    }

    private String free(String wanted) {
        int index = used.merge(wanted, 1, Integer::sum) - 1;
        String name = CueDraft.repeat(wanted, index);
        return names.containsKey(name) ? free(wanted) : name;
    }

    private boolean inside(CueDraft draft, long start) {
        Instant at = draft.at();
        Place place = at == null ? draft.place() : at.place();
        long last = start + (draft.times() - 1) * draft.everyNanos();
        if (start < 0) {
            problems.add(place, "the cue comes before the play begins", "write an instant of at least 0s");
        } else if (last >= lastsNanos) {
            String which = draft.times() > 1 ? "the last repeat, at " : "the cue, at ";
            problems.add(
                    place,
                    which + Durations.text(last) + ", comes after the end of the play",
                    "the play lasts " + Durations.text(lastsNanos));
        }
        return start >= 0 && last < lastsNanos;
    }

    /**
     * When a draft is first played; null when that cannot be said. A chain of cues that count from each other is
     * walked to its beginning and back, not recursed into, since a file may hold a very long one.
     */
    private @Nullable Long start(CueDraft draft) {
        Set<CueDraft> seen = Collections.newSetFromMap(new IdentityHashMap<>());
        List<CueDraft> chain = new ArrayList<>();
        CueDraft at = draft;
        while (at != null && !starts.containsKey(at)) {
            if (!seen.add(at)) {
                circle(at, chain);
                break;
            }
            chain.add(at);
            at = base(at);
        }
        for (int i = chain.size() - 1; i >= 0; i--) {
            starts.put(chain.get(i), new Start(fromBase(chain.get(i))));
        }
        Start start = starts.get(draft);
        return start == null ? null : start.nanos();
    }

    private void circle(CueDraft at, List<CueDraft> chain) {
        Instant instant = at.at();
        problems.add(
                instant == null ? at.place() : instant.place(),
                "the cue waits for itself",
                "let one cue of the circle say an instant such as 15s");
        chain.forEach(cue -> starts.put(cue, new Start(null)));
        chain.clear();
    }

    private @Nullable CueDraft base(CueDraft draft) {
        Instant at = draft.at();
        Named named = at == null || at.base() == null ? null : names.get(at.base());
        return named == null ? null : named.draft();
    }

    private @Nullable Long fromBase(CueDraft draft) {
        Instant at = draft.at();
        return at == null ? null : nanos(at);
    }

    /** An instant in play time; null when it counts from a cue that is not there, which is noted. */
    @Nullable
    Long nanos(Instant at) {
        String base = at.base();
        if (base == null) {
            return at.offsetNanos();
        }
        Named named = named(base, at.place());
        if (named == null) {
            return null;
        }
        CueDraft draft = named.draft();
        Start start = draft == null ? new Start(0L) : starts.get(draft);
        Long from = start == null ? null : start.nanos();
        return from == null ? null : Long.valueOf(from + named.offsetNanos() + at.offsetNanos());
    }

    private @Nullable Named named(String name, Place place) {
        Named named = names.get(name);
        if (named == null && !problems.meansRefusedName(name)) {
            String otherwise = names.isEmpty()
                    ? "name a cue with as: " + name
                    : "the named cues are "
                            + Sentence.and(names.keySet().stream().limit(8).toList());
            problems.add(
                    place,
                    "no cue is named " + Quantity.quoted(name),
                    NearWord.remedy(name, names.keySet(), otherwise));
        }
        return named;
    }

    /** Whether there is a cue of that name; notes it when there is none. */
    boolean knows(Placed<String> name) {
        return named(name.value(), name.place()) != null;
    }

    /** A name, and the draft and the repeat that it stands for; without a draft, an instant of the play. */
    private record Named(@Nullable CueDraft draft, long offsetNanos, Place place) {}

    private record Start(@Nullable Long nanos) {}
}
