package steelyard.drills.read;

import java.util.Set;
import java.util.TreeSet;
import steelyard.drills.model.LoadProbe;
import steelyard.drills.model.Pool;
import steelyard.drills.model.Serves;
import steelyard.drills.model.Target;

/** Checks the gauges that cues set. */
final class GaugeChecks {
    private final Problems problems;
    private final Roster roster;

    GaugeChecks(Problems problems, Roster roster) {
        this.problems = problems;
        this.roster = roster;
    }

    /** Refuses a gauge that none of the target's backends shows; one that nothing counts gets a notice. */
    void refuseUnknown(Place place, String gauge, Target target) {
        Set<String> shown = new TreeSet<>(Set.of(Serves.CPU));
        for (Pool pool : roster.poolsOf(target)) {
            pool.backends().stream()
                    .filter(backend -> target.backends().contains(backend.name()))
                    .flatMap(backend -> backend.serves().gauges().stream())
                    .forEach(each -> shown.add(each.name()));
        }
        if (shown.contains(gauge)) {
            noticeUncounted(place, "load", gauge, target);
        } else {
            problems.add(
                    place,
                    target.text() + " shows no gauge " + Quantity.quoted(gauge),
                    NearWord.remedy(gauge, shown, "it shows " + Sentence.and(shown)));
        }
    }

    /** Notes when no pool of the target makes anything of a gauge. */
    void noticeUncounted(Place place, String word, String gauge, Target target) {
        if (roster.poolsOf(target).stream().noneMatch(pool -> counts(pool, gauge))) {
            problems.notice(
                    place,
                    word + " changes no weight: no pool of its target counts the gauge " + gauge,
                    "write weights: load, and load: {gauges: {" + gauge + ": 90%}} for the pool");
        }
    }

    private static boolean counts(Pool pool, String gauge) {
        LoadProbe load = pool.health().load();
        return pool.weights() == Pool.Weights.LOAD
                && load != null
                && load.gauges().stream().anyMatch(each -> each.name().equals(gauge));
    }
}
