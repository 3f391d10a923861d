package steelyard.drills.read;

import java.util.List;
import java.util.stream.Stream;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Cue;
import steelyard.drills.model.Target;

/** Reads one cue. */
final class CueReader {
    private static final List<String> KINDS =
            Stream.of(Cue.Kind.values()).map(Cue.Kind::word).toList();
    private static final List<String> COMMON = List.of("at", "as", "for", "times", "every");
    private static final Quantity<Integer> TIMES = Numbers.from(1, 1_000);
    private static final Quantity<Double> FACTOR =
            Numbers.NUMBER.that(n -> n >= 0 && n <= 1_000_000, "is out of range", "write a number from 0 to 1000000");
    private static final Quantity<Integer> FAILURE = Numbers.from(400, 599);
    private static final Quantity<String> WHEN = Words.of("a moment to fail", "at-once", "after-work");
    private static final Quantity<String> NAME = Names.some("a name", "fulmar dies")
            .that(CueReader::fits, "cannot name a cue", "use no + and no -, and begin with a letter");

    private final Problems problems;
    private final RetuneReader retunes;

    CueReader(Problems problems) {
        this.problems = problems;
        this.retunes = new RetuneReader(problems);
    }

    /** Notes which names of cues will be refused, so that instants which count from them raise no problem of their own. */
    static void refuseNames(List<Node> cues, Problems problems) {
        for (Node cue : cues) {
            for (Node.Entry entry : cue instanceof Node.Entries map ? map.list() : List.<Node.Entry>of()) {
                String name = entry.value() instanceof Node.Scalar scalar
                        ? scalar.text().strip()
                        : "";
                if (entry.key().equals("as") && !name.isEmpty() && !fits(name)) {
                    problems.refuseName(name);
                }
            }
        }
    }

    /** A cue of a file. */
    CueDraft read(Node node) {
        Fields fields = Fields.open(node, Keys.CUE, problems);
        if (!fields.has("at")) {
            fields.missing("at", "say when, such as at: 15s");
        }
        return draft(fields, Instant.read(fields, "at"));
    }

    /** A cue that a person sends: due at once unless it says {@code at:}, and never repeated. */
    CueDraft readByHand(Node node) {
        Fields fields = Fields.open(node, Keys.CUE, problems);
        for (String key : List.of("times", "every")) {
            if (fields.has(key)) {
                problems.add(fields.keyPlace(key), "a cue sent by hand is played once", "leave out " + key);
            }
        }
        Instant now = new Instant(node.place(), null, 0);
        return draft(fields, fields.has("at") ? Instant.read(fields, "at") : now);
    }

    private CueDraft draft(Fields fields, @Nullable Instant at) {
        String name = fields.read("as", NAME);
        Cue.Kind kind = kind(fields);
        if (kind != null) {
            refuseStrangeKeys(fields, kind);
        }
        boolean repeats = fields.has("times");
        if (repeats != fields.has("every")) {
            problems.add(
                    fields.keyPlace(repeats ? "times" : "every"),
                    repeats ? "times needs every" : "every needs times",
                    "write both, such as times: 3, every: 10s");
        }
        return new CueDraft(
                fields.place(),
                name == null ? null : new Placed<>(fields.valuePlace("as"), name),
                at,
                kind,
                kind == null ? null : target(fields, kind),
                settings(fields, kind),
                fields.read("for", Durations.POSITIVE, 0L),
                fields.read("times", TIMES, 1),
                fields.read("every", Durations.POSITIVE, Durations.SECOND));
    }

    private Cue.@Nullable Kind kind(Fields fields) {
        // A retune says how drains change, under the word of another kind.
        boolean retunes = fields.has(Cue.Kind.RETUNE.word());
        List<String> given = fields.given().stream()
                .filter(KINDS::contains)
                .filter(word -> !retunes || !word.equals(Cue.Kind.DRAIN.word()))
                .toList();
        if (given.size() == 1) {
            return Cue.Kind.values()[KINDS.indexOf(given.get(0))];
        }
        if (given.size() > 1) {
            problems.add(
                    fields.keyPlace(given.get(1)),
                    "a cue does one thing, this one says " + Sentence.and(given),
                    "write a cue for each");
        } else if (!fields.odd()) {
            problems.add(fields.place(), "the cue does nothing", "write one of " + Sentence.or(KINDS));
        }
        return null;
    }

    private void refuseStrangeKeys(Fields fields, Cue.Kind kind) {
        List<String> own = settingsOf(kind);
        for (String key : fields.given()) {
            boolean cannotEnd = key.equals("for") && !kind.canEnd();
            boolean strange = !COMMON.contains(key) && !KINDS.contains(key) && !own.contains(key);
            if (strange || cannotEnd) {
                problems.add(
                        fields.keyPlace(key),
                        kind.word() + " does not know '" + key + "'",
                        own.isEmpty() ? "leave it out" : "it knows " + Sentence.and(own));
            }
        }
    }

    private static List<String> settingsOf(Cue.Kind kind) {
        return switch (kind) {
            case SLOW -> List.of("factor", "plus", "probes");
            case FAIL -> List.of("share", "status", "when", "probes");
            case FLAP_PROBE -> List.of("period");
            case REWEIGH -> List.of("weight");
            case DRAIN -> List.of("limit");
            case SURGE -> List.of("factor");
            case LOAD -> List.of("gauge", "to");
            case FILL -> List.of("to");
            case RETUNE -> List.of("probe", "drain", "method");
            case HANG, REFUSE, KILL, REVIVE, FAIL_PROBE, HEAL, ADMIT, WITHDRAW -> List.of();
        };
    }

    private @Nullable TargetDraft target(Fields fields, Cue.Kind kind) {
        TargetDraft draft = TargetDraft.read(fields, kind.word());
        if (draft == null || !ofPools(kind) || draft.kind() == Target.Kind.POOL) {
            return draft;
        }
        if (draft.kind() == Target.Kind.BACKENDS && draft.names().size() == 1) {
            return new TargetDraft(draft.place(), Target.Kind.POOL, draft.names());
        }
        problems.add(
                draft.place(),
                kind == Cue.Kind.SURGE ? "a surge is of the traffic to a pool" : "a retune is of a pool",
                "write " + kind.word() + ": {pool: seats}");
        return null;
    }

    private static boolean ofPools(Cue.Kind kind) {
        return kind == Cue.Kind.SURGE || kind == Cue.Kind.RETUNE;
    }

    private Cue.Settings settings(Fields fields, Cue.@Nullable Kind kind) {
        if (kind == Cue.Kind.SLOW && !fields.has("factor") && !fields.has("plus")) {
            problems.add(fields.place(), "slow needs 'factor' or 'plus'", "write factor: 5, or plus: 100ms");
        }
        needs(fields, kind, Cue.Kind.SURGE, "factor", "write factor: 2");
        needs(fields, kind, Cue.Kind.FLAP_PROBE, "period", "write period: 4s");
        needs(fields, kind, Cue.Kind.REWEIGH, "weight", "write weight: 3");
        needs(fields, kind, Cue.Kind.LOAD, "gauge", "write gauge: memory");
        needs(fields, kind, Cue.Kind.LOAD, "to", "write to: 90%");
        needs(fields, kind, Cue.Kind.FILL, "to", "write to: 95%");
        return new Cue.Settings(
                fields.read("factor", FACTOR, 1.0),
                fields.read("plus", Durations.DURATION, 0L),
                fields.read("share", Shares.ABOVE_ZERO, 1.0),
                fields.read("status", FAILURE, 500),
                fields.read("when", WHEN, "at-once").equals("after-work"),
                fields.read("probes", Numbers.YES_OR_NO, false),
                fields.read("period", Durations.PERIOD, 0L),
                fields.read("weight", HostsReader.WEIGHT, 0),
                fields.read("limit", Durations.POSITIVE, 0L),
                fields.read("gauge", Names.GAUGE),
                fields.read("to", Shares.SHARE, 0.0),
                kind == Cue.Kind.RETUNE ? retunes.read(fields) : null);
    }

    private static void needs(Fields fields, Cue.@Nullable Kind kind, Cue.Kind of, String key, String remedy) {
        if (kind == of && !fields.has(key) && !fields.odd()) {
            fields.problems().add(fields.place(), of.word() + " needs '" + key + "'", remedy);
        }
    }

    private static boolean fits(String name) {
        return name.indexOf('+') < 0
                && name.indexOf('-') < 0
                && name.length() <= 100
                && Character.isLetter(name.codePointAt(0))
                && name.chars().noneMatch(Character::isISOControl);
    }
}
