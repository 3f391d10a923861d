package steelyard.harness.conduct;

import steelyard.backends.behave.Change;
import steelyard.drills.model.Cue;

/** What a cue on backends, and its end, change in a behaviour. */
final class Changes {
    private Changes() {}

    /** The change that a cue on backends makes. Throws {@link IllegalArgumentException} for settings that make none. */
    static Change of(Cue cue) {
        Cue.Settings settings = cue.settings();
        return switch (cue.kind()) {
            case SLOW -> new Change.Slow(settings.factor(), settings.plusNanos(), settings.probes());
            case FAIL ->
                new Change.Fail(
                        settings.share(),
                        settings.status(),
                        settings.afterWork() ? Change.When.AFTER_WORK : Change.When.AT_ONCE,
                        settings.probes());
            case HANG -> new Change.Hang();
            case REFUSE -> new Change.Refuse();
            case KILL -> new Change.Kill();
            case REVIVE -> new Change.Revive();
            case FAIL_PROBE -> new Change.FailProbe();
            case FLAP_PROBE -> new Change.FlapProbe(settings.periodNanos());
            case HEAL -> Change.Heal.all();
            case LOAD -> new Change.Load(gauge(cue), settings.to());
            case FILL -> new Change.Fill(settings.to());
            case REWEIGH, DRAIN, ADMIT, WITHDRAW, RETUNE, SURGE -> throw notOnBackends(cue.kind());
        };
    }

    /** The change that undoes a fault of that kind, and nothing else. */
    static Change end(Cue.Kind kind) {
        return switch (kind) {
            case SLOW -> new Change.Heal(Change.Kind.SLOW);
            case FAIL -> new Change.Heal(Change.Kind.FAIL);
            case HANG -> new Change.Heal(Change.Kind.HANG);
            case REFUSE -> new Change.Heal(Change.Kind.REFUSE);
            case FAIL_PROBE -> new Change.Heal(Change.Kind.FAIL_PROBE);
            case FLAP_PROBE -> new Change.Heal(Change.Kind.FLAP_PROBE);
            case KILL -> new Change.Revive();
            case LOAD -> new Change.Heal(Change.Kind.LOAD);
            case FILL -> new Change.Heal(Change.Kind.FILL);
            case REVIVE, HEAL, REWEIGH, DRAIN, ADMIT, WITHDRAW, RETUNE, SURGE -> throw notOnBackends(kind);
        };
    }

    private static String gauge(Cue cue) {
        String gauge = cue.settings().gauge();
        if (gauge == null) {
            throw new IllegalArgumentException("load names no gauge");
        }
        return gauge;
    }

    private static IllegalArgumentException notOnBackends(Cue.Kind kind) {
        return new IllegalArgumentException(kind.word() + " is no fault of a backend");
    }
}
