package steelyard.harness.console;

import java.util.ArrayList;
import java.util.EnumMap;
import java.util.List;
import java.util.Map;
import steelyard.balancer.core.standing.Standing;
import steelyard.drills.model.Backend;
import steelyard.drills.model.Cause;
import steelyard.drills.model.Cue;
import steelyard.drills.model.Drill;
import steelyard.drills.read.DrillReader;
import steelyard.harness.record.PlayBoard;
import steelyard.harness.record.PlayListener;

/** Drills and figures for tests of the views. */
final class Boards {
    static final long SECOND = 1_000_000_000L;

    private Boards() {}

    /** A minute's drill with those backends, one killed at 15 s and back at 35 s. */
    static Drill drill(String title, List<String> backends) {
        return drill(
                title,
                backends,
                "{at: 15s, kill: " + backends.get(0) + ", as: the first dies}",
                "{at: 35s, revive: " + backends.get(0) + "}");
    }

    /** A minute's drill with those backends and cues. */
    static Drill drill(String title, List<String> backends, String... cues) {
        StringBuilder text = new StringBuilder("drill: '" + title + "'\nabout: Views.\nstage:\n  pools:\n    seats:\n");
        text.append("      method: round-robin\n      serves: {workers: 1, queue: 1, time: {fixed: 1ms}}\n");
        text.append("      backends:\n");
        backends.forEach(name -> text.append("        ").append(name).append(": {weight: 1}\n"));
        text.append("traffic:\n  - {to: seats, arrivals: even, rate: 10/s, requests: [{get: /, share: 100%}]}\n");
        text.append("lasts: 60s\ncues:\n");
        for (String cue : cues) {
            text.append("  - ").append(cue).append('\n');
        }
        text.append("expect:\n  - {measure: failed, at-most: 1%}\n");
        return DrillReader.read("views", text.toString())
                .value()
                .orElseThrow(() -> new IllegalArgumentException(
                        DrillReader.read("views", text.toString()).problems().toString()));
    }

    /** Figures at 20 s: the first backend down, the others up; the given failures. */
    static PlayBoard.Figures figures(Drill drill, Map<Cause, Long> failures) {
        List<PlayBoard.BackendFigures> backends = new ArrayList<>();
        for (Backend each : drill.stage().backends()) {
            boolean first = backends.isEmpty();
            backends.add(new PlayBoard.BackendFigures(
                    each.name(),
                    "seats",
                    first ? Standing.DOWN : Standing.UP,
                    !first,
                    1,
                    first ? 0.25 : 1,
                    first ? 0.004 : 0.5,
                    0.5,
                    first ? 0 : 1234,
                    0));
        }
        Cue played = drill.cues().get(0);
        return new PlayBoard.Figures(
                20 * SECOND,
                false,
                20_000,
                15_412,
                failures,
                893,
                3,
                0,
                0,
                backends,
                new PlayBoard.Played(15 * SECOND, played, PlayListener.By.DRILL));
    }

    /** Every cause at once. */
    static Map<Cause, Long> everyCause() {
        Map<Cause, Long> all = new EnumMap<>(Cause.class);
        for (Cause cause : Cause.values()) {
            all.put(cause, 1_000_000L + cause.ordinal());
        }
        return all;
    }
}
