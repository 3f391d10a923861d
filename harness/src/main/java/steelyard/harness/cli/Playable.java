package steelyard.harness.cli;

import java.nio.file.Path;
import java.util.ArrayList;
import java.util.HashSet;
import java.util.List;
import java.util.Set;
import steelyard.backends.stub.Answers;
import steelyard.backends.stub.BadAnswers;
import steelyard.drills.model.Backend;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Pool;
import steelyard.drills.read.DrillPlaces;
import steelyard.drills.read.Problem;
import steelyard.harness.stage.live.LiveStage;
import steelyard.harness.traffic.OfferedRate;

/** What can be known of a drill without playing it, beyond what its text says. */
final class Playable {
    private Playable() {}

    /** Problems of the folders of mapping files that the drill names; each is read as a play would read it. */
    static List<Problem> answers(Drill drill, DrillPlaces places) {
        List<Problem> problems = new ArrayList<>();
        Set<String> seen = new HashSet<>();
        for (Pool pool : drill.stage().pools()) {
            for (Backend backend : pool.backends()) {
                String folder = backend.serves().answers();
                if (folder != null && seen.add(folder)) {
                    read(Path.of(folder), places, pathOf(pool, backend, places), problems);
                }
            }
        }
        return problems;
    }

    private static void read(Path folder, DrillPlaces places, String[] path, List<Problem> problems) {
        try {
            Answers.read(folder);
        } catch (BadAnswers bad) {
            String remedy = "correct the folder, or leave out answers";
            problems.add(places.problem(String.valueOf(bad.getMessage()), remedy, path));
        }
    }

    /** A backend's own folder stands before that of its pool. */
    private static String[] pathOf(Pool pool, Backend backend, DrillPlaces places) {
        String[] own = {"stage", "pools", pool.name(), "backends", backend.group(), "serves", "answers"};
        return places.has(own) ? own : new String[] {"stage", "pools", pool.name(), "serves", "answers"};
    }

    /** A notice where the drill offers more than can be sent in real time; a forecast can play it all the same. */
    static List<Problem> rates(Drill drill, DrillPlaces places) {
        double peak = OfferedRate.peakPerSecond(drill);
        if (peak <= LiveStage.MOST_REQUESTS_A_SECOND) {
            return List.of();
        }
        String rate = places.has("traffic", "0", "steps") ? "steps" : "rate";
        String[] one = {"traffic", "0", rate};
        return List.of(places.notice(
                "the traffic reaches " + Math.round(peak) + " requests a second, surges included, more than the "
                        + LiveStage.MOST_REQUESTS_A_SECOND + " that a rehearsal can send",
                "lower its rates or its surge; a forecast can play it as it is",
                drill.traffic().size() == 1 ? one : new String[] {"traffic"}));
    }
}
