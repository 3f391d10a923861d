package steelyard.harness.traffic;

import java.util.stream.LongStream;
import steelyard.drills.model.Cue;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Traffic;

/** How much traffic a drill offers, surges of its own cues included. */
public final class OfferedRate {
    private OfferedRate() {}

    /** The highest expected rate of all streams together, in requests a second. */
    public static double peakPerSecond(Drill drill) {
        return turns(drill)
                .filter(each -> each < drill.lastsNanos())
                .mapToDouble(each -> perSecond(drill, each))
                .max()
                .orElse(0);
    }

    /** Every instant at which a rate may change. */
    private static LongStream turns(Drill drill) {
        LongStream cues = drill.cues().stream()
                .filter(each -> each.kind() == Cue.Kind.SURGE)
                .mapToLong(Cue::atNanos);
        return LongStream.concat(cues, drill.traffic().stream().flatMapToLong(OfferedRate::steps));
    }

    private static LongStream steps(Traffic traffic) {
        long[] starts = new long[traffic.steps().size()];
        for (int i = 1; i < starts.length; i++) {
            starts[i] = starts[i - 1] + traffic.steps().get(i - 1).forNanos();
        }
        return LongStream.of(starts);
    }

    private static double perSecond(Drill drill, long atNanos) {
        return drill.traffic().stream()
                .mapToDouble(each -> perSecond(each, atNanos) * factor(drill, each, atNanos))
                .sum();
    }

    private static double perSecond(Traffic traffic, long atNanos) {
        long left = atNanos;
        for (Traffic.Step step : traffic.steps()) {
            if (left < step.forNanos()) {
                return step.perSecond();
            }
            left -= step.forNanos();
        }
        return traffic.steps().get(traffic.steps().size() - 1).perSecond();
    }

    private static double factor(Drill drill, Traffic traffic, long atNanos) {
        double factor = 1;
        for (Cue cue : drill.cues()) {
            boolean ended = cue.forNanos() > 0 && cue.atNanos() + cue.forNanos() <= atNanos;
            if (cue.kind() == Cue.Kind.SURGE && cue.atNanos() <= atNanos && meets(drill, traffic, cue)) {
                factor = ended ? 1 : cue.settings().factor();
            }
        }
        return factor;
    }

    private static boolean meets(Drill drill, Traffic traffic, Cue cue) {
        return drill.stage().pool(traffic.pool()).backends().stream()
                .anyMatch(each -> cue.target().backends().contains(each.name()));
    }
}
