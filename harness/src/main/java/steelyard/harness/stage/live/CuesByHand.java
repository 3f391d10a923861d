package steelyard.harness.stage.live;

import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import steelyard.balancer.live.control.CueTaker;
import steelyard.drills.model.Cue;
import steelyard.drills.model.Drill;
import steelyard.drills.read.DrillReader;
import steelyard.drills.read.Parsed;
import steelyard.drills.read.Problem;
import steelyard.harness.conduct.Conductor;

/** Takes cues that a person sends while a drill is played: read as those of a file, and handed to the conductor. Thread-safe. */
public final class CuesByHand implements CueTaker {
    private final Drill drill;
    private final Conductor conductor;
    private final List<Cue> sent = new ArrayList<>();

    /** @param conductor of the play of this drill */
    public CuesByHand(Drill drill, Conductor conductor) {
        this.drill = drill;
        this.conductor = conductor;
    }

    @Override
    public synchronized Reply take(String text) {
        if (!conductor.hasNext()) {
            return Reply.nothingPlays();
        }
        Parsed<Cue> read = DrillReader.readCue(text, withSent());
        if (!read.ok()) {
            return Reply.refused(firstProblem(read));
        }
        Cue cue = read.value().orElseThrow();
        if (cue.atNanos() != 0) {
            return Reply.refused("cue: a cue sent by hand is carried out at once; leave out at");
        }
        Optional<String> idle;
        try {
            idle = conductor.idle(cue);
            conductor.byHand(cue);
        } catch (IllegalArgumentException cannot) {
            return Reply.refused("cue: " + cannot.getMessage() + "; send another one");
        }
        sent.add(cue);
        return Reply.taken(idle.map(why -> "nothing changes: " + why).orElse(cue.text()));
    }

    /** The drill as if it had the cues that were sent, so that every name is there once. */
    private Drill withSent() {
        List<Cue> cues = new ArrayList<>(drill.cues());
        cues.addAll(sent);
        return new Drill(
                drill.name(),
                drill.about(),
                drill.stage(),
                drill.traffic(),
                drill.lastsNanos(),
                cues,
                drill.expectations());
    }

    private static String firstProblem(Parsed<Cue> read) {
        return read.problems().stream()
                .filter(each -> each.severity() == Problem.Severity.PROBLEM)
                .findFirst()
                .map(Problem::toString)
                .orElseThrow();
    }
}
