package steelyard.harness.record;

import java.util.ArrayList;
import java.util.List;
import java.util.Set;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Backend;
import steelyard.drills.model.Cue;
import steelyard.drills.model.Drain;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Expectation;
import steelyard.drills.model.Front;
import steelyard.drills.model.Health;
import steelyard.drills.model.Host;
import steelyard.drills.model.InFlight;
import steelyard.drills.model.LoadProbe;
import steelyard.drills.model.Picking;
import steelyard.drills.model.Pool;
import steelyard.drills.model.Pool.Count;
import steelyard.drills.model.Pool.Method;
import steelyard.drills.model.Pool.Weights;
import steelyard.drills.model.Probe;
import steelyard.drills.model.Serves;
import steelyard.drills.model.Stage;
import steelyard.drills.model.Target;
import steelyard.drills.model.Timeouts;
import steelyard.drills.model.Traffic;
import steelyard.drills.model.WarmUp;
import steelyard.drills.model.Wire;

/** A small drill for tests: pool seats with fulmar, gannet and petrel, and pool cargo with skua beside gannet. */
public final class TestDrill {
    public static final long MS = 1_000_000L;
    public static final long S = 1_000_000_000L;
    public static final int FULMAR = 0;
    public static final int GANNET = 1;
    public static final int PETREL = 2;
    public static final int SKUA = 3;
    public static final int SEATS = 0;
    public static final int CARGO = 1;

    private final List<Cue> cues = new ArrayList<>();
    private final List<Expectation> expectations = new ArrayList<>();
    private Weights weights = Weights.BACKEND;
    private long lastsNanos = 10 * S;
    private @Nullable LoadProbe load;
    private @Nullable InFlight inFlight;
    private boolean byConnection;

    public TestDrill lasts(long nanos) {
        lastsNanos = nanos;
        return this;
    }

    public TestDrill weights(Weights how) {
        weights = how;
        return this;
    }

    /** Pool seats weighs by load, read that often. */
    public TestDrill load(long everyNanos) {
        LoadProbe usual = LoadProbe.USUAL;
        load = new LoadProbe(usual.path(), everyNanos, everyNanos, 3 * everyNanos, usual.floor(), 0, usual.gauges());
        return this;
    }

    /** Requests of pool seats wait, at most so many, when each of its backends has one in flight. */
    public TestDrill waiting(int most) {
        inFlight = new InFlight(1, most, S);
        return this;
    }

    /** Pool cargo passes connections on. */
    public TestDrill cargoByConnection() {
        byConnection = true;
        return this;
    }

    public TestDrill cue(Cue cue) {
        cues.add(cue);
        return this;
    }

    public TestDrill expect(Expectation expectation) {
        expectations.add(expectation);
        return this;
    }

    public Drill build() {
        Serves serves = new Serves(2, 8, Serves.Time.fixed(10 * MS), 512, false, 0, null);
        Pool seats = pool(
                "seats",
                List.of(
                        new Backend("fulmar", "fulmar", 1, "north-quay", false, serves),
                        new Backend("gannet", "gannet", 1, "south-quay", false, serves),
                        new Backend("petrel", "petrel", 1, "east-quay", false, serves)));
        Pool cargo = pool("cargo", List.of(new Backend("skua", "skua", 1, "south-quay", false, serves)));
        Traffic.Step step = new Traffic.Step(lastsNanos, 100);
        Traffic.Request get = new Traffic.Request("GET", "/sailings/today", 1, 0, Set.of());
        return new Drill(
                "Lose one, \"at the peak\" & <after>",
                "What a person should look for.",
                new Stage(
                        1,
                        Stage.USUAL_CONNECTIONS,
                        List.of(
                                new Host("north-quay", 10, "north"),
                                new Host("south-quay", 20, "south"),
                                new Host("east-quay", 20, null)),
                        List.of(seats, cargo)),
                List.of(
                        new Traffic("seats", Traffic.Arrivals.EVEN, List.of(step), 8, 0, 2 * S, List.of(get)),
                        new Traffic("cargo", Traffic.Arrivals.EVEN, List.of(step), 8, 0, 2 * S, List.of(get))),
                lastsNanos,
                cues,
                expectations);
    }

    public static Target fulmar() {
        return backends("fulmar");
    }

    public static Target backends(String... names) {
        return new Target(Target.Kind.BACKENDS, String.join(", ", names), List.of(names));
    }

    /** A cue named after what it does. */
    public static Cue cue(long atNanos, Cue.Kind kind, Target target) {
        return new Cue(kind.word() + " " + target.text(), atNanos, kind, target, Cue.Settings.NONE, 0);
    }

    private Pool pool(String name, List<Backend> backends) {
        boolean byLoad = load != null && name.equals("seats");
        Health health = Health.NONE
                .with(new Probe(Probe.Kind.HTTP, "/afloat", S, 400 * MS, 3, 2))
                .with(new WarmUp(5 * S, 0.1));
        boolean octets = byConnection && name.equals("cargo");
        Picking picking = Picking.by(Method.WEIGHTED_ROUND_ROBIN)
                .with(byLoad ? Weights.LOAD : weights)
                .with(octets ? Count.CONNECTIONS : Count.REQUESTS);
        return Pool.with(name, picking)
                .wire(octets ? Wire.USUAL.with(new Front(0, Front.Kind.TCP, null)) : Wire.USUAL)
                .health(byLoad ? health.with(load) : health)
                .inFlight(name.equals("seats") ? inFlight : null)
                .drain(new Drain(10 * S, false))
                .timeouts(new Timeouts(S, 30 * S, 60 * S))
                .of(backends);
    }
}
